import { spawn, type ChildProcess } from 'node:child_process'
import { fileURLToPath } from 'node:url'

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url))

export interface ApiProcess {
  /** where it listens */
  url: string
  /** as a pulled plug: SIGKILL, at once */
  kill(): Promise<void>
  /** as a service manager stops it */
  stop(): Promise<void>
}

/** The API with its worker inside, a real process of its own, run from the sources. */
export async function startApi(env: Record<string, string>): Promise<ApiProcess> {
  const child = spawn(
    process.execPath,
    ['--conditions=source', `--import=${here('./source-loader.mjs')}`, here('../main.ts')],
    {
      cwd: here('../..'),
      env: { PATH: process.env['PATH'] ?? '', ...env },
      stdio: ['ignore', 'pipe', 'pipe'],
    },
  )
  const end = async (signal: 'SIGKILL' | 'SIGTERM') => {
    if (child.exitCode !== null || child.signalCode !== null) return
    const ended = new Promise<void>((resolve) => child.once('exit', () => resolve()))
    child.kill(signal)
    await ended
  }
  return { url: await addressOf(child), kill: () => end('SIGKILL'), stop: () => end('SIGTERM') }
}

async function addressOf(child: ChildProcess): Promise<string> {
  let output = ''
  return new Promise((resolve, reject) => {
    const hear = (chunk: Buffer) => {
      output += chunk.toString('utf8')
      const url = /Weirlight listens on (http:\/\/\S+)/.exec(output)?.[1]
      if (url) resolve(url)
    }
    child.stdout?.on('data', hear)
    child.stderr?.on('data', hear)
    child.once('exit', () => reject(new Error(`The API did not start:\n${output}`)))
  })
}
