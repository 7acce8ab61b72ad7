import type { FieldProblem } from '@weirlight/shared/errors'
import type { KnownMethod, KnownPoint } from './receiving.repository.js'

/** A bench clock may run ahead of the server's by this much. */
const CLOCK_SLACK_MINUTES = 5

export interface ToReceive {
  clientId: string
  pointId: string
  collectedAt: string
  receivedAt: string
  determinations: readonly { methodId: string }[]
}

/** What only the server can know of a sample to receive: every problem at once, on the field it belongs to. Pure. */
export function checkReceived(
  sample: ToReceive,
  known: { points: ReadonlyMap<string, KnownPoint>; methods: ReadonlyMap<string, KnownMethod>; now: Date },
): FieldProblem[] {
  const point = known.points.get(sample.pointId)
  const latest = known.now.getTime() + CLOCK_SLACK_MINUTES * 60_000
  const problems: FieldProblem[] = []
  const say = (path: string, message: string) => problems.push({ path, message })
  if (!point) say('pointId', 'There is no such sampling point.')
  else if (point.clientId !== sample.clientId)
    say('pointId', `${point.code} is not a sampling point of this client.`)
  else {
    if (!point.clientActive) say('clientId', `${point.clientName} is no longer a client.`)
    if (!point.active) say('pointId', `${point.code} is no longer in use.`)
  }
  if (Date.parse(sample.collectedAt) > latest) say('collectedAt', 'Collected in the future: check the date.')
  if (Date.parse(sample.receivedAt) > latest) say('receivedAt', 'Received in the future: check the date.')
  sample.determinations.forEach(({ methodId }, index) => {
    const method = known.methods.get(methodId)
    const path = `determinations.${index}.methodId`
    if (!method) say(path, 'There is no such method.')
    else if (!method.active) say(path, `${method.title} is no longer in use.`)
  })
  return problems
}
