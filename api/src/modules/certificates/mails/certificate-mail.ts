import type { CertificateSnapshot } from '@weirlight/shared/contracts'
import { oneLine, showTime } from '../../../platform/index.js'

export interface CertificateMail {
  snapshot: CertificateSnapshot
  link: string
}

export function certificateMail({ snapshot, link }: CertificateMail): { subject: string; text: string } {
  const { sample, laboratory } = snapshot
  const lines = snapshot.results.map((line) => {
    const uncertainty = line.uncertaintyText ? ` ± ${line.uncertaintyText}` : ''
    const limit = line.limitValue
      ? `, ${line.statement} ${line.limitValue} ${line.limitUnit} (${line.limitName})`
      : ''
    return `  ${line.determination}: ${line.text}${uncertainty} ${line.unit}${limit}`
  })
  const replaces = snapshot.replaces
    ? `It replaces ${snapshot.replaces}, which is no longer valid. Reason: ${snapshot.replacementReason}\n\n`
    : ''
  return {
    subject: oneLine(`Certificate of analysis ${snapshot.number}, sample ${sample.number}, ${sample.point}`),
    text: `Certificate of analysis ${snapshot.number} is attached.

Utility  ${snapshot.client.name}
Point    ${sample.point} (${sample.pointCode})
Sample   ${sample.number}, collected ${showTime(new Date(sample.collectedAt), snapshot.timeZone)}

${lines.join('\n')}

${replaces}${snapshot.caution}

See it, with everything the laboratory has released to you: ${link}
Anyone can check that it is genuine and current: ${snapshot.checkUrl}

${laboratory.name}, ${laboratory.phone}
`,
  }
}

export function withdrawnMail({ snapshot, reason }: { snapshot: CertificateSnapshot; reason: string }): {
  subject: string
  text: string
} {
  return {
    subject: `Certificate ${snapshot.number} is withdrawn`,
    text: `Certificate of analysis ${snapshot.number} (sample ${snapshot.sample.number}, ${snapshot.sample.point}) is withdrawn and
must not be used any more.

Reason: ${reason}

${snapshot.laboratory.name}, ${snapshot.laboratory.phone}
`,
  }
}
