export function secondFactorOffMail(mail: {
  name: string
  /** the administrator who did it; null when the person did */
  by: { name: string; reason: string } | null
  laboratoryName: string
}): { subject: string; text: string } {
  const what = mail.by
    ? `${mail.by.name} has taken the second factor off your account in Weirlight and ended every open session of yours.
The reason given: ${mail.by.reason}`
    : 'the second factor of your account in Weirlight was taken off just now, with your passphrase and a code.'
  return {
    subject: `Your account at ${mail.laboratoryName} has no second factor any more`,
    text: `Good day ${mail.name},

${what}

Until you set up another one, under Your account, your passphrase alone signs you in. If you did not ask for this, tell
the laboratory's administrator at once.
`,
  }
}
