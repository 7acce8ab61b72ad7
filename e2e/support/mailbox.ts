import { expect } from '@playwright/test'
import { product } from './accounts.js'

interface Address {
  address: string
}
interface Attachment {
  generatedFileName: string
  contentType: string
}
export interface Mail {
  id: string
  subject: string
  to: Address[]
  text: string
  html?: string
  headers: Record<string, string>
  attachments?: Attachment[]
}

interface Wanted {
  to: string
  /** in the subject or the text */
  about: string | RegExp
  patienceMs?: number
}

const patience = Number(process.env['E2E_PATIENCE'] ?? 1)

const fits = (wanted: Wanted) => (mail: Mail) => {
  const all = `${mail.subject}\n${mail.text}`
  return (
    mail.to.some((each) => each.address.toLowerCase() === wanted.to.toLowerCase()) &&
    (typeof wanted.about === 'string' ? all.includes(wanted.about) : wanted.about.test(all))
  )
}

/** The mail fake: real SMTP in, JSON out. */
export const mailbox = {
  async list(wanted: Wanted): Promise<Mail[]> {
    const response = await fetch(`${product().mailUrl}/api/email`)
    const all = (await response.json()) as Mail[]
    return all.filter(fits(wanted))
  },

  /** Waits for the one message; the queue may still be at it. */
  async read(wanted: Wanted): Promise<Mail> {
    let found: Mail[] = []
    await expect
      .poll(async () => (found = await mailbox.list(wanted)).length, {
        message: `a message to ${wanted.to} about ${String(wanted.about)}`,
        timeout: (wanted.patienceMs ?? 45_000) * patience,
      })
      .toBeGreaterThan(0)
    const [mail] = found
    if (!mail) throw new Error('unreachable')
    return mail
  },

  async attachment(mail: Mail, type: string): Promise<Buffer> {
    const found = mail.attachments?.find((each) => each.contentType === type)
    if (!found) throw new Error(`“${mail.subject}” carries no ${type}.`)
    const name = encodeURIComponent(found.generatedFileName)
    const response = await fetch(`${product().mailUrl}/api/email/${mail.id}/attachment/${name}`)
    if (!response.ok) throw new Error(`The attachment ${name} answered ${response.status}.`)
    return Buffer.from(await response.arrayBuffer())
  },

  /** The link in a message, as a path of the application. */
  link(mail: Mail, pattern: RegExp): string {
    const [url] = pattern.exec(mail.text) ?? []
    if (!url) throw new Error(`“${mail.subject}” carries no link ${String(pattern)}.`)
    return new URL(url).pathname
  },
}
