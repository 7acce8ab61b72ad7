export function passphraseChangedMail(mail: { name: string; laboratoryName: string }): {
  subject: string
  text: string
} {
  return {
    subject: `Your passphrase for ${mail.laboratoryName} was changed`,
    text: `Good day ${mail.name},

the passphrase of your account in Weirlight was changed just now, and every open session of yours was ended. If that
was not you, tell the laboratory's administrator at once.
`,
  }
}
