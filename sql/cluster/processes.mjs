import { spawn } from 'node:child_process'
import { readFileSync, readlinkSync } from 'node:fs'
import { createInterface } from 'node:readline'

/** What /proc says of a process: its start time tells a reused number from the process that was meant. */
export const startTimeOf = (pid) => {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    const afterName = stat.slice(stat.lastIndexOf(')') + 2).split(' ')
    return afterName[0] === 'Z' ? undefined : afterName[19]
  } catch {
    return undefined
  }
}

export const isRunning = ({ pid, startTime }) => startTime !== undefined && startTimeOf(pid) === startTime

export const parentOf = (pid) => {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8')
    return Number(stat.slice(stat.lastIndexOf(')') + 2).split(' ')[1])
  } catch {
    return undefined
  }
}

const nameOf = (pid) => {
  try {
    return readFileSync(`/proc/${pid}/comm`, 'utf8').trim()
  } catch {
    return ''
  }
}

/** The npm that runs this script, if one does: a shell may stand between the two. */
export const npmAbove = () => {
  if (!process.env.npm_lifecycle_event) return undefined
  let pid = process.ppid
  for (let i = 0; i < 3 && pid > 1; i += 1) {
    if (nameOf(pid).startsWith('npm')) return { pid, startTime: startTimeOf(pid) }
    pid = parentOf(pid)
  }
  return undefined
}

export const workingFolderOf = (pid) => {
  try {
    return readlinkSync(`/proc/${pid}/cwd`)
  } catch {
    return undefined
  }
}

export const pause = (ms) => new Promise((resolve) => setTimeout(resolve, ms))

export const signalGroup = (pid, signal) => {
  try {
    process.kill(-pid, signal)
    return true
  } catch {
    return false
  }
}

const going = new Set()

/** Kills what `run` still has going, with everything below it; for the way out. */
export const killRunning = () => {
  for (const child of going) signalGroup(child.pid, 'SIGKILL')
}

/**
 * Runs a command to its end. Gives its exit code and output; throws only when it cannot be started.
 * Every child is the head of a process group of its own: Ctrl-C reaches the launcher alone, which then stops
 * its children in order.
 */
export const run = (command, args, { input, isEchoed = false, onLine, ...options } = {}) =>
  new Promise((resolve, reject) => {
    const stdin = input === undefined ? 'ignore' : 'pipe'
    const child = spawn(command, args, { ...options, detached: true, stdio: [stdin, 'pipe', 'pipe'] })
    going.add(child)
    const stdout = []
    const both = []
    const take =
      (...lists) =>
      (chunk) => {
        for (const list of lists) list.push(chunk)
        if (isEchoed) process.stdout.write(chunk)
      }
    child.stdout.on('data', take(stdout, both))
    child.stderr.on('data', take(both))
    if (onLine) createInterface({ input: child.stdout }).on('line', onLine)
    child.once('error', (error) => {
      going.delete(child)
      reject(error)
    })
    child.once('close', (code, signal) => {
      going.delete(child)
      const text = (list) => Buffer.concat(list).toString('utf8')
      resolve({ code: code ?? 1, signal, stdout: text(stdout), output: text(both) })
    })
    child.stdin?.on('error', () => {})
    child.stdin?.end(input)
  })

/** Starts a service that runs until it is stopped; its last lines are kept to explain a death. */
export const startService = ({ name, command, args, onOutput, onDeath, ...options }) => {
  const child = spawn(command, args, { ...options, detached: true, stdio: ['ignore', 'pipe', 'pipe'] })
  const lines = []
  let hasEnded = false
  let isStopping = false
  const keep = (chunk) => {
    lines.push(chunk.toString('utf8'))
    if (lines.length > 200) lines.shift()
    onOutput?.(chunk)
  }
  child.stdout.on('data', keep)
  child.stderr.on('data', keep)

  const lastLines = () => lines.join('').split('\n').slice(-25).join('\n').trim()
  const ended = new Promise((resolve) => {
    const end = (code, signal) => {
      if (hasEnded) return
      hasEnded = true
      resolve({ code, signal })
      if (!isStopping) onDeath?.({ name, code, signal, lastLines: lastLines() })
    }
    child.once('error', (error) => {
      lines.push(String(error))
      end(1, null)
    })
    // 'close', not 'exit': the last words must have been read before they are quoted.
    child.once('close', end)
  })

  return {
    name,
    pid: child.pid,
    startTime: child.pid === undefined ? undefined : startTimeOf(child.pid),
    ended,
    hasEnded: () => hasEnded,
    lastLines,
    /** Asks politely, waits, then insists. */
    stop: async ({ signal = 'SIGTERM', patienceMs = 10_000 } = {}) => {
      isStopping = true
      if (hasEnded) return
      child.kill(signal)
      const timer = setTimeout(() => signalGroup(child.pid, 'SIGKILL'), patienceMs)
      await ended
      clearTimeout(timer)
    },
    /** Ends it as a power cut would. */
    kill: async () => {
      isStopping = true
      if (!hasEnded) signalGroup(child.pid, 'SIGKILL')
      await ended
    },
  }
}
