import type { CertificateSnapshot } from '@weirlight/shared/contracts'
import { showTime } from '../../platform/index.js'

type Changes = CertificateSnapshot['changes']
type Line = CertificateSnapshot['results'][number]

/** What an amendment says differently from the certificate it replaces: every printed fact of client, sample and results. Pure. */
export function changesBetween(old: CertificateSnapshot, now: CertificateSnapshot): Changes {
  const before = factsOf(old)
  const after = factsOf(now)
  return [...new Set([...before.keys(), ...after.keys()])].flatMap((what) => {
    const [was, is] = [before.get(what) ?? '', after.get(what) ?? '']
    return was === is ? [] : [{ what, was: was || '–', is: is || '–' }]
  })
}

function factsOf({ client, sample, results, timeZone }: CertificateSnapshot): Map<string, string> {
  const at = (iso: string) => showTime(new Date(iso), timeZone)
  return new Map([
    ['Client', client.name],
    ['Address', client.address],
    ['Contact', client.contact],
    ['System', client.systemId],
    ['Point', `${sample.point} (${sample.pointCode})`],
    ['Purpose', sample.purpose],
    ['Collected', at(sample.collectedAt)],
    ['Collected by', sample.collectedBy],
    ['Received', at(sample.receivedAt)],
    ['Preservation', sample.preservation],
    ['pH', sample.ph],
    ['Temperature', sample.temperatureC],
    ['Condition', sample.condition],
    ['Qualification', sample.qualification],
    ...results.flatMap((line): [string, string][] => [
      [line.determination, shown(line)],
      [`${line.determination}, method`, `${line.method}, ${line.edition}`],
      [`${line.determination}, quantification limit`, `${line.quantificationLimit} ${line.unit}`],
      [`${line.determination}, remarks`, line.flags.join(', ')],
    ]),
  ])
}

function shown(line: Line): string {
  const uncertainty = line.uncertaintyText ? ` ± ${line.uncertaintyText}` : ''
  const limit = line.limitValue ? ` ${line.limitValue} ${line.limitUnit}` : ''
  return `${line.text}${uncertainty} ${line.unit}, ${line.statement}${limit}`
}
