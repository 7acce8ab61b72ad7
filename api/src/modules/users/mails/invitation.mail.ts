import { timeInWords, type LinkMail } from './link-mail.js'

export function invitationMail(mail: LinkMail): { subject: string; text: string } {
  return {
    subject: `Your account at ${mail.laboratoryName}`,
    text: `Good day ${mail.name},

${mail.startedBy ?? mail.laboratoryName} has made an account for you in Weirlight, the record of ${mail.laboratoryName}.
Open this link and choose a passphrase:

${mail.link}

The link works once, until ${timeInWords(mail.expiresAt, mail.timeZone)}. Nobody at the laboratory knows or chooses
your passphrase. If you did not expect this message, leave the link unopened; nothing happens then.
`,
  }
}
