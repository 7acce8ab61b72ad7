import { Injectable } from '@nestjs/common'
import { Database } from '../database/database.js'
import { JobsService } from '../jobs/jobs.service.js'
import { MailTransport } from '../mail/mail-transport.js'
import { HealthRepository } from './health.repository.js'

type Part = 'ok' | 'failing'

@Injectable()
export class HealthService {
  constructor(
    private readonly db: Database,
    private readonly probe: HealthRepository,
    private readonly jobs: JobsService,
    private readonly transport: MailTransport,
  ) {}

  async check(): Promise<{ status: Part; database: Part; jobs: Part; mail: Part }> {
    const [database, jobs, mail] = await Promise.all([
      part(() => this.probe.answers(this.db.fresh)),
      part(() => this.jobs.isMoving(this.db.fresh)),
      part(() => this.transport.answers()),
    ])
    const isWell = database === 'ok' && jobs === 'ok' && mail === 'ok'
    return { status: isWell ? 'ok' : 'failing', database, jobs, mail }
  }
}

async function part(check: () => Promise<boolean>): Promise<Part> {
  const late = new Promise<boolean>((resolve) => {
    setTimeout(() => resolve(false), 4_000).unref()
  })
  try {
    return (await Promise.race([check(), late])) ? 'ok' : 'failing'
  } catch {
    return 'failing'
  }
}
