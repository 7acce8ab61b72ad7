import { existsSync, mkdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { inData } from './paths.mjs'
import { isRunning, startTimeOf } from './processes.mjs'
import { Refusal } from './say.mjs'

const file = () => inData('running.json')

const read = () => {
  try {
    return JSON.parse(readFileSync(file(), 'utf8'))
  } catch {
    return undefined
  }
}

/** What runs on this checkout's own data at the moment, if anything does. */
export const whatRuns = () => {
  const holder = existsSync(file()) ? read() : undefined
  return holder && isRunning(holder) ? holder : undefined
}

const sayTaken = (holder) => {
  const at = holder.url ? ` at ${holder.url}` : ' and is still starting'
  return new Refusal(
    `'${holder.command}' already runs in this checkout${at} (process ${holder.pid}).\n` +
      'Use that one, or stop it first with Ctrl-C in its window.',
  )
}

/** One launcher at a time on this checkout's data. `note` adds what others may want to know of it. */
export const takeLock = (command) => {
  const mine = { command, pid: process.pid, startTime: startTimeOf(process.pid) }
  mkdirSync(inData(), { recursive: true })
  const holder = whatRuns()
  if (holder) throw sayTaken(holder)
  rmSync(file(), { force: true })
  try {
    writeFileSync(file(), JSON.stringify(mine), { flag: 'wx', mode: 0o600 })
  } catch {
    throw sayTaken(whatRuns() ?? { command, pid: 0 })
  }
  return {
    note: (facts) => {
      Object.assign(mine, facts)
      writeFileSync(`${file()}.new`, JSON.stringify(mine), { mode: 0o600 })
      renameSync(`${file()}.new`, file())
    },
    release: () => {
      if (read()?.pid === process.pid) rmSync(file(), { force: true })
    },
  }
}
