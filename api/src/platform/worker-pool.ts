import { availableParallelism } from 'node:os'
import { extname } from 'node:path'
import { fileURLToPath } from 'node:url'
import { Piscina } from 'piscina'

/** Threads for work that would hold up every other request: laying out documents, reading sheets. */
export function openWorkerPool(file: URL, options: { maxQueue?: number; memoryMb?: number } = {}): Piscina {
  const filename = fileURLToPath(file)
  const isSource = extname(filename) === '.ts'
  return new Piscina({
    filename,
    minThreads: 0,
    maxThreads: Math.max(1, Math.min(4, availableParallelism() - 1)),
    idleTimeout: 60_000,
    maxQueue: options.maxQueue ?? 500,
    resourceLimits: { maxOldGenerationSizeMb: options.memoryMb ?? 512 },
    // run from the sources (tests), a thread has to learn TypeScript first
    execArgv: isSource ? ['--import=tsx', '--conditions=source'] : [],
  })
}

/** The worker beside a module, as source or as built. */
export function workerFile(base: string, name: string): URL {
  return new URL(`./${name}${base.endsWith('.ts') ? '.ts' : '.js'}`, base)
}
