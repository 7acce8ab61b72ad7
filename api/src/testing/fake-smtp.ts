import { createServer, type Server, type Socket } from 'node:net'
import type { AddressInfo } from 'node:net'

export interface ReceivedMail {
  from: string
  to: string[]
  raw: string
  header(name: string): string | undefined
}

/** A mail server that really speaks SMTP, keeps what it is given, and can be told to fail. */
export class FakeSmtp {
  readonly received: ReceivedMail[] = []
  /** answers the next commands named here once with this line: `{ RCPT: '550 no such box' }` */
  answers: Record<string, string> = {}
  /** called when a message is whole, before it is accepted */
  onData: () => Promise<void> = () => Promise.resolve()
  private server: Server | undefined
  private readonly sockets = new Set<Socket>()
  private port = 0

  get url(): string {
    return `smtp://127.0.0.1:${this.port}`
  }

  async start(): Promise<this> {
    const server = createServer((socket) => this.serve(socket))
    await new Promise<void>((resolve) => server.listen(this.port, '127.0.0.1', resolve))
    this.port = (server.address() as AddressInfo).port
    this.server = server
    return this
  }

  async stop(): Promise<void> {
    for (const socket of this.sockets) socket.destroy()
    await new Promise<void>((resolve) => {
      if (this.server) this.server.close(() => resolve())
      else resolve()
    })
    this.server = undefined
  }

  private serve(socket: Socket): void {
    this.sockets.add(socket)
    socket.on('close', () => this.sockets.delete(socket))
    socket.on('error', () => undefined)
    let from = ''
    let to: string[] = []
    let isData = false
    let text = ''
    const say = (line: string) => socket.write(`${line}\r\n`)
    const command = (line: string) => {
      const verb = line.slice(0, 4).toUpperCase()
      const answer = this.answers[verb]
      if (answer !== undefined) {
        say(answer)
        return
      }
      if (verb === 'MAIL') from = /<(.*)>/.exec(line)?.[1] ?? ''
      if (verb === 'RCPT') to.push(/<(.*)>/.exec(line)?.[1] ?? '')
      if (verb === 'DATA') isData = true
      if (verb === 'RSET') to = []
      say(verb === 'DATA' ? '354 go on' : verb === 'QUIT' ? '221 bye' : '250 ok')
      if (verb === 'QUIT') socket.end()
    }
    socket.on('data', (chunk) => {
      text += chunk.toString('utf8')
      for (;;) {
        const end = text.indexOf(isData ? '\r\n.\r\n' : '\r\n')
        if (end < 0) return
        const part = text.slice(0, end)
        text = text.slice(end + (isData ? 5 : 2))
        if (!isData) {
          command(part)
          continue
        }
        isData = false
        const mail = toMail({ from, to, raw: part })
        to = []
        void this.onData().then(() => {
          this.received.push(mail)
          say('250 kept')
        })
      }
    })
    say('220 fake.example ESMTP')
  }
}

function toMail(mail: { from: string; to: string[]; raw: string }): ReceivedMail {
  const head = (mail.raw.split('\r\n\r\n')[0] ?? '').replaceAll(/\r\n[ \t]+/g, ' ')
  return {
    ...mail,
    header: (name) => new RegExp(`^${name}: (.*)$`, 'im').exec(head)?.[1]?.trim(),
  }
}
