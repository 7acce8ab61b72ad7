import pg from 'pg'

const CHANNEL = 'weirlight_jobs'
const AGAIN_AFTER = 5_000

/**
 * Hears of new jobs at once, so that workers may poll seldom. Losing the line loses nothing: polling goes on,
 * and the line is taken up again.
 */
export class JobBell {
  private client: pg.Client | undefined
  private timer: NodeJS.Timeout | undefined
  private isStopped = false
  private readonly listeners = new Map<string, (() => void)[]>()

  constructor(
    private readonly url: string,
    private readonly onError: (error: Error) => void,
  ) {}

  on(name: string, listener: () => void): void {
    this.listeners.set(name, [...(this.listeners.get(name) ?? []), listener])
  }

  async start(): Promise<void> {
    if (this.isStopped) return
    const client = new pg.Client({ connectionString: this.url, application_name: 'weirlight-bell' })
    client.on('error', (error) => this.lost(client, error))
    client.on('end', () => this.lost(client))
    client.on('notification', ({ payload }) => this.ring(payload ?? ''))
    this.client = client
    try {
      await client.connect()
      await client.query(`listen ${CHANNEL}`)
    } catch (error) {
      this.lost(client, error instanceof Error ? error : new Error(String(error)))
    }
  }

  async stop(): Promise<void> {
    this.isStopped = true
    clearTimeout(this.timer)
    const { client } = this
    this.client = undefined
    await client?.end().catch(() => undefined)
  }

  private ring(name: string): void {
    for (const listener of this.listeners.get(name) ?? []) listener()
  }

  private lost(client: pg.Client, error?: Error): void {
    if (this.isStopped || this.client !== client) return
    this.client = undefined
    if (error) this.onError(error)
    client.end().catch(() => undefined)
    this.timer = setTimeout(() => void this.start(), AGAIN_AFTER)
    this.timer.unref()
  }
}
