import autocannon, { type LoadRequest } from 'autocannon'
import { measuredOf, type Measured } from './measured.js'

/** Nothing here runs longer, however slow the machine. */
const TIME_LIMIT_MS = 90_000

interface Series {
  name: string
  atATime: number
  requests: number
  statements?: number | undefined
}

/** Requests to the running product. An answer that is not a success ends the bench: it would measure refusals. */
export async function loadByHttp(
  series: Series & {
    url: string
    /** of a connection, one after another */
    next: (connection: number) => LoadRequest
    onAnswer?: (connection: number, body: string) => void
  },
): Promise<Measured> {
  const times: number[] = []
  let refusal: string | undefined
  let connections = 0
  const begun = performance.now()
  await new Promise<void>((resolve, reject) => {
    const instance = autocannon(
      {
        url: series.url,
        connections: series.atATime,
        amount: series.requests,
        timeout: 30,
        setupClient: (client) => {
          const connection = connections
          connections += 1
          client.setRequests([
            {
              setupRequest: (request) => ({ ...request, ...series.next(connection) }),
              onResponse: (status, body) => {
                if (status >= 200 && status < 300) return series.onAnswer?.(connection, body)
                refusal ??= `${series.name}: answered ${status}: ${body.slice(0, 600)}`
                instance.stop()
              },
            },
          ])
        },
      },
      (error, result) => {
        clearTimeout(timer)
        if (error) return reject(error)
        if (refusal !== undefined) return reject(new Error(refusal))
        if (result.errors > 0 || result.timeouts > 0) {
          return reject(new Error(`${series.name}: ${result.errors} connections broke or timed out.`))
        }
        resolve()
      },
    )
    const timer = setTimeout(() => instance.stop(), TIME_LIMIT_MS)
    instance.on('response', (_client: unknown, _status: number, _bytes: number, ms: number) => {
      times.push(ms)
    })
  })
  return measuredOf(times, { ...series, tookMs: performance.now() - begun })
}

/** The same work without the application, as many at a time. */
export async function loadByHand(
  series: Series & { work: (lane: number, turn: number) => Promise<unknown> },
): Promise<Measured> {
  const times: number[] = []
  const begun = performance.now()
  const runLane = async (lane: number) => {
    for (let turn = 0; turn * series.atATime + lane < series.requests; turn += 1) {
      const started = performance.now()
      if (started - begun > TIME_LIMIT_MS) return
      await series.work(lane, turn)
      times.push(performance.now() - started)
    }
  }
  await Promise.all(Array.from({ length: series.atATime }, (_, lane) => runLane(lane)))
  return measuredOf(times, { ...series, tookMs: performance.now() - begun })
}
