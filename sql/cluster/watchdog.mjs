// A launcher that is killed outright (kill -9, a closed container) cannot tidy up. This small process outlives
// it: it hears by a closed pipe that the launcher has gone, ends those of its processes that still run and
// removes the folders it had meant to remove. After an orderly end there is nothing left to do.

import { spawn } from 'node:child_process'
import { rmSync } from 'node:fs'
import { createInterface } from 'node:readline'
import { fileURLToPath } from 'node:url'
import { isRunning, pause, signalGroup } from './processes.mjs'

const file = fileURLToPath(import.meta.url)

export const startWatchdog = () => {
  const child = spawn(process.execPath, [file], { detached: true, stdio: ['pipe', 'ignore', 'ignore'] })
  child.unref()
  child.stdin.on('error', () => {})
  // An ordinary exit must not wait for the pipe.
  child.stdin.unref?.()
  const tell = (message) => child.stdin.write(`${JSON.stringify(message)}\n`)
  return {
    /** `signal`: what ends it in order, e.g. SIGINT for PostgreSQL's fast shutdown. */
    watch: ({ pid, startTime, signal = 'SIGTERM' }) => tell({ pid, startTime, signal }),
    removeLater: (folder) => tell({ folder }),
  }
}

const end = async ({ pid, startTime, signal }) => {
  if (!isRunning({ pid, startTime })) return
  process.kill(pid, signal)
  for (let i = 0; i < 100 && isRunning({ pid, startTime }); i += 1) await pause(100)
  if (isRunning({ pid, startTime })) signalGroup(pid, 'SIGKILL')
}

const main = async () => {
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => {})
  const processes = []
  const folders = []
  for await (const line of createInterface({ input: process.stdin })) {
    const message = JSON.parse(line)
    if (message.folder) folders.push(message.folder)
    if (message.pid) processes.unshift(message)
  }
  for (const watched of processes) await end(watched)
  for (const folder of folders) rmSync(folder, { recursive: true, force: true, maxRetries: 5 })
}

if (process.argv[1] === file) await main()
