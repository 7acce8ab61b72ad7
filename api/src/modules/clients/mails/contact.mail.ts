interface ContactMail {
  name: string
  clientName: string
  newEmail: string
  by: string
  laboratoryName: string
  laboratoryPhone: string
  laboratoryEmail: string
  getsAlerts: boolean
  getsCertificates: boolean
}

function what({ getsAlerts, getsCertificates }: ContactMail): string {
  if (getsAlerts && getsCertificates) return 'Alerts and certificates'
  if (getsAlerts) return 'Alerts'
  return getsCertificates ? 'Certificates' : 'Messages'
}

function closing(mail: ContactMail): string {
  const reach = [mail.laboratoryPhone, mail.laboratoryEmail].filter((text) => text !== '').join(', ')
  return `If this is not right, tell the laboratory at once${reach === '' ? '' : `: ${reach}`}.`
}

/** To the old address: a changed mailbox must not make alerts vanish unseen. */
export function contactMovedMail(mail: ContactMail): { subject: string; text: string } {
  return {
    subject: `Messages for ${mail.clientName} now go to another address`,
    text: `Good day ${mail.name},

${mail.by} of ${mail.laboratoryName} changed your address as a contact of ${mail.clientName}. ${what(mail)} that came
here go to ${mail.newEmail} from now on.

${closing(mail)}
`,
  }
}

export function contactRemovedMail(mail: ContactMail): { subject: string; text: string } {
  return {
    subject: `You are no longer a contact of ${mail.clientName}`,
    text: `Good day ${mail.name},

${mail.by} of ${mail.laboratoryName} took you off the contacts of ${mail.clientName}. ${what(mail)} come here no longer.

${closing(mail)}
`,
  }
}
