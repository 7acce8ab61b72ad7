import { Injectable, type OnApplicationShutdown } from '@nestjs/common'
import { createTransport, type Transporter } from 'nodemailer'
import { Clock } from '../clock/clock.js'
import { Settings } from '../config/settings.js'

export interface OutgoingMail {
  messageId: string
  to: string
  subject: string
  text: string
  html: string | undefined
  attachments: { filename: string; content: Buffer; contentType: string }[]
}

const ANSWER_KEPT = 15_000

/** The only door to the mail server. */
@Injectable()
export class MailTransport implements OnApplicationShutdown {
  private readonly transporter: Transporter
  private lastAnswer: { at: number; answers: boolean } | undefined

  constructor(
    private readonly settings: Settings,
    private readonly clock: Clock,
  ) {
    const { hostname, port, protocol, username, password } = new URL(settings.smtpUrl)
    this.transporter = createTransport({
      host: hostname.replaceAll(/^\[|\]$/g, ''),
      port: port === '' ? (protocol === 'smtps:' ? 465 : 25) : Number(port),
      secure: protocol === 'smtps:',
      ...(username
        ? { auth: { user: decodeURIComponent(username), pass: decodeURIComponent(password) } }
        : {}),
      // all together shorter than the lease of a claimed message
      connectionTimeout: 10_000,
      greetingTimeout: 10_000,
      socketTimeout: 20_000,
      disableFileAccess: true,
      disableUrlAccess: true,
    })
  }

  async send(mail: OutgoingMail): Promise<void> {
    await this.transporter.sendMail({
      from: this.settings.mailFrom,
      to: { name: '', address: mail.to },
      subject: mail.subject,
      text: mail.text,
      ...(mail.html === undefined ? {} : { html: mail.html }),
      messageId: mail.messageId,
      attachments: mail.attachments,
      headers: { 'Auto-Submitted': 'auto-generated' },
    })
  }

  /** Whether the mail server answers; asked at most every few seconds. */
  async answers(): Promise<boolean> {
    const now = this.clock.now().getTime()
    if (this.lastAnswer && now - this.lastAnswer.at < ANSWER_KEPT) return this.lastAnswer.answers
    const answers = await this.transporter.verify().then(
      () => true,
      () => false,
    )
    this.lastAnswer = { at: now, answers }
    return answers
  }

  onApplicationShutdown(): void {
    this.transporter.close()
  }
}
