import { determinationName, showUnit, type AlertView } from '@weirlight/shared/contracts'
import { oneLine, showTime } from '../../../platform/index.js'

export interface AlertMail {
  alert: AlertView
  timeZone: string
  laboratory: { name: string; phone: string }
  link: string
}

const what = (alert: AlertView) =>
  `${determinationName(alert.analyte, alert.form)} ${alert.text} ${showUnit(alert.unit)}`

export function alertMail({ alert, timeZone, laboratory, link }: AlertMail): {
  subject: string
  text: string
} {
  const uncertainty = alert.uncertaintyText === null ? '' : `, U ${alert.uncertaintyText} (k = 2)`
  const earlier =
    alert.earlier.length === 0
      ? 'no earlier results'
      : alert.earlier
          .slice(0, 6)
          .map((one) => `${one.text} on ${showTime(new Date(one.at), timeZone).slice(0, 10)}`)
          .join('; ')
  return {
    subject: oneLine(
      `Alert ${alert.number}: ${what(alert)} at ${alert.pointName}, above ${alert.limitValue} ${showUnit(alert.limitUnit)}`,
    ),
    text: `A released result lies above a limit of your programme.

Alert      ${alert.number}
Utility    ${alert.clientName}
Point      ${alert.pointName}
Sample     ${alert.sampleNumber}, collected ${showTime(new Date(alert.collectedAt), timeZone)}
Result     ${what(alert)}${uncertainty}
Limit      ${alert.limitName}: ${alert.limitValue} ${showUnit(alert.limitUnit)} (${alert.limitKind}; ${alert.limitSource})
Compared   by the rule "${alert.decisionRule}"
Released   ${showTime(new Date(alert.releasedAt), timeZone)}
Earlier    ${earlier}

Please say that you have seen this: ${link}

This notice reports a laboratory result. It is not a determination of compliance or violation. Reporting duties, deadlines,
confirmation sampling and public notice are set by your primacy agency and local rules, which take precedence.
Your agency: ${alert.agencyName || 'not recorded'}${alert.agencyPhone ? `, ${alert.agencyPhone}` : ''}.

${laboratory.name}, ${laboratory.phone}
`,
  }
}

export function cancelledAlertMail({
  alert,
  laboratory,
  reason,
}: {
  alert: AlertView
  laboratory: { name: string; phone: string }
  reason: string
}): {
  subject: string
  text: string
} {
  return {
    subject: `Alert ${alert.number} is cancelled`,
    text: `Alert ${alert.number} (${what(alert)} at ${alert.pointName}, sample ${alert.sampleNumber}) is cancelled.

Reason: ${reason}

If you have acted on it already, tell your primacy agency of this change as its rules ask.

${laboratory.name}, ${laboratory.phone}
`,
  }
}
