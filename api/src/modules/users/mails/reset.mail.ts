import { timeInWords, type LinkMail } from './link-mail.js'

export function resetMail(mail: LinkMail): { subject: string; text: string } {
  const why = mail.startedBy
    ? `${mail.startedBy} has started a new passphrase for your account.`
    : 'Somebody, most likely you, asked for a new passphrase for your account.'
  return {
    subject: `A new passphrase for ${mail.laboratoryName}`,
    text: `Good day ${mail.name},

${why} Open this link to choose it:

${mail.link}

The link works once, until ${timeInWords(mail.expiresAt, mail.timeZone)}. Until it is used your passphrase stays as
it is. If you did not ask for it, leave the link unopened and tell the laboratory's administrator.
`,
  }
}
