import { Injectable } from '@nestjs/common'
import { DiscoveryService, MetadataScanner, Reflector } from '@nestjs/core'
import { JOB, type JobRun } from './job-handler.decorator.js'
import { declaredJobs, type Job } from './job.js'

export interface FoundHandler {
  job: Job
  run: (data: unknown, run: JobRun) => Promise<void>
}

type Methods = Record<string, (data: unknown, run: JobRun) => Promise<void>>

/** Finds every method marked `@JobHandler`. */
@Injectable()
export class JobHandlers {
  constructor(
    private readonly discovery: DiscoveryService,
    private readonly scanner: MetadataScanner,
    private readonly reflector: Reflector,
  ) {}

  find(): FoundHandler[] {
    const found: FoundHandler[] = []
    for (const wrapper of this.discovery.getProviders()) {
      const instance: unknown = wrapper.isDependencyTreeStatic() ? wrapper.instance : undefined
      if (typeof instance !== 'object' || instance === null) continue
      const methods = instance as Methods
      for (const name of this.scanner.getAllMethodNames(Object.getPrototypeOf(instance) as object | null)) {
        const method = methods[name]
        if (!method) continue
        const job = this.reflector.get<Job | undefined>(JOB, method)
        if (job) found.push({ job, run: method.bind(instance) })
      }
    }
    return found
  }

  /** @throws when a declared job has no handler, or two */
  check(found: readonly FoundHandler[]): void {
    const problems = declaredJobs().flatMap((job) => {
      const count = found.filter((handler) => handler.job.name === job.name).length
      if (count === 1) return []
      return [count === 0 ? `${job.name} has no handler` : `${job.name} has ${count} handlers`]
    })
    if (problems.length > 0) throw new Error(`Jobs: ${problems.join('; ')}.`)
  }
}
