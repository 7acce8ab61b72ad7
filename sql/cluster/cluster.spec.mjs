// Expected values here are constructed.

import assert from 'node:assert/strict'
import { execFile } from 'node:child_process'
import { createServer } from 'node:net'
import { test } from 'node:test'
import { fileURLToPath } from 'node:url'
import { addCounts, lastLine, playwrightCounts, settle, tapCounts, vitestCounts } from './counts.mjs'
import { findStale } from './packages.mjs'
import { freePort, isPortFree } from './ports.mjs'
import { isRunning, run, startService, startTimeOf } from './processes.mjs'
import { undoStack } from './launch.mjs'

test('a package of another version, or gone from the disk, is stale; one for another system is not', () => {
  const wanted = {
    '': { version: '1.0.0' },
    shared: { version: '1.0.0' },
    'node_modules/same': { version: '1.0.0' },
    'node_modules/older': { version: '2.0.0' },
    'node_modules/gone': { version: '1.0.0' },
    'node_modules/new': { version: '1.0.0' },
    'node_modules/elsewhere': { version: '1.0.0', optional: true },
  }
  const installed = {
    'node_modules/same': { version: '1.0.0' },
    'node_modules/older': { version: '1.9.0' },
    'node_modules/gone': { version: '1.0.0' },
  }
  const stale = findStale({ wanted, installed, isPresent: (place) => place !== 'node_modules/gone' })
  assert.deepEqual(stale, ['node_modules/older', 'node_modules/gone', 'node_modules/new'])
})

test('a taken port is not given out', async () => {
  const server = createServer()
  await new Promise((resolve) => server.listen(0, '127.0.0.1', resolve))
  const { port } = server.address()
  assert.equal(await isPortFree(port), false)
  assert.notEqual(await freePort(port), port)
  await new Promise((resolve) => server.close(resolve))
  assert.equal(await freePort(port), port)
})

test("vitest's report: a file that could not be loaded is a failure", () => {
  const report = {
    numPassedTests: 3,
    numFailedTests: 1,
    numPendingTests: 2,
    numTodoTests: 1,
    testResults: [
      { status: 'failed', assertionResults: [] },
      { status: 'failed', assertionResults: [{}] },
      { status: 'passed', assertionResults: [{}] },
    ],
  }
  assert.deepEqual(vitestCounts(report), { passed: 3, failed: 2, skipped: 3 })
})

test("playwright's report: a flaky test and a broken set-up are failures", () => {
  const report = { stats: { expected: 5, unexpected: 1, flaky: 1, skipped: 2 }, errors: [{}] }
  assert.deepEqual(playwrightCounts(report), { passed: 5, failed: 3, skipped: 2 })
})

test("node's own report", () => {
  const text = '# tests 4\n# pass 2\n# fail 1\n# cancelled 0\n# skipped 1\n# todo 0\n'
  assert.deepEqual(tapCounts(text), { passed: 2, failed: 1, skipped: 1 })
})

test('a suite that crashed, ran nothing, or left with an error has failed', () => {
  const clean = { passed: 2, failed: 0, skipped: 0 }
  assert.deepEqual(settle({ counts: clean, code: 0 }), clean)
  assert.equal(settle({ counts: clean, code: 1 }).failed, 1)
  assert.equal(settle({ counts: undefined, code: 0 }).failed, 1)
  assert.equal(settle({ counts: { passed: 0, failed: 0, skipped: 4 }, code: 0 }).failed, 1)
  assert.equal(settle({ counts: { passed: 1, failed: 2, skipped: 0 }, code: 1 }).failed, 2)
})

test('the last line names skipped tests only when there are any', () => {
  const sum = addCounts({ passed: 1, failed: 0, skipped: 0 }, { passed: 2, failed: 3, skipped: 0 })
  assert.equal(lastLine(sum), '3 passed, 3 failed')
  assert.equal(lastLine({ passed: 1, failed: 0, skipped: 4 }), '1 passed, 0 failed, 4 skipped')
})

test('a process is told from another that was given its number', async () => {
  const mine = { pid: process.pid, startTime: startTimeOf(process.pid) }
  assert.equal(isRunning(mine), true)
  assert.equal(isRunning({ ...mine, startTime: '1' }), false)
  const child = execFile(process.execPath, ['-e', ''])
  const facts = { pid: child.pid, startTime: startTimeOf(child.pid) }
  await new Promise((resolve) => child.once('exit', resolve))
  assert.equal(isRunning(facts), false)
})

test('the death of a service is told once, with its last words; a stop is no death', async () => {
  const deaths = []
  const options = { name: 'x', command: process.execPath, onDeath: (death) => deaths.push(death) }
  const dying = startService({ ...options, args: ['-e', 'console.error("last words"); process.exit(3)'] })
  await dying.ended
  const lasting = startService({ ...options, args: ['-e', 'setInterval(() => {}, 1000)'] })
  await lasting.stop()
  assert.deepEqual(deaths, [{ name: 'x', code: 3, signal: null, lastLines: 'last words' }])
})

test('a service that does not listen to a polite stop is killed', async () => {
  const args = ['-e', 'process.on("SIGTERM", () => {}); console.log("on"); setInterval(() => {}, 1000)']
  const isOn = { now: false }
  const stubborn = startService({
    name: 'x',
    command: process.execPath,
    args,
    onOutput: () => (isOn.now = true),
  })
  while (!isOn.now) await new Promise((resolve) => setTimeout(resolve, 20))
  await stubborn.stop({ patienceMs: 100 })
  assert.equal((await stubborn.ended).signal, 'SIGKILL')
})

test('things are undone in reverse, once, and a failing step does not keep the others back', async () => {
  const done = []
  const undo = undoStack()
  undo.push(() => done.push('first'))
  undo.push(() => {
    throw new Error('stuck')
  })
  undo.push(() => done.push('last'))
  await assert.rejects(undo.run(), /stuck/)
  await assert.rejects(undo.run(), /stuck/)
  assert.deepEqual(done, ['last', 'first'])
})

test('what a launcher started and meant to remove goes with it, even after kill -9', async () => {
  const script = `
    import { mkdtempSync } from 'node:fs'
    import { startService } from '${new URL('./processes.mjs', import.meta.url)}'
    import { startWatchdog } from '${new URL('./watchdog.mjs', import.meta.url)}'
    const watchdog = startWatchdog()
    const folder = mkdtempSync('${fileURLToPath(new URL('file:///tmp/'))}weirlight-spec-')
    watchdog.removeLater(folder)
    const service = startService({ name: 'x', command: process.execPath, args: ['-e', 'setInterval(() => {}, 1e3)'] })
    watchdog.watch(service)
    process.stdout.write(JSON.stringify({ pid: service.pid, startTime: service.startTime, folder }), () =>
      process.kill(process.pid, 'SIGKILL'))`
  const answer = await run(process.execPath, ['--input-type=module', '-e', script])
  assert.equal(answer.signal, 'SIGKILL')
  const left = JSON.parse(answer.stdout)
  const { existsSync } = await import('node:fs')
  for (let i = 0; i < 100 && (isRunning(left) || existsSync(left.folder)); i += 1) {
    await new Promise((resolve) => setTimeout(resolve, 50))
  }
  assert.equal(isRunning(left), false)
  assert.equal(existsSync(left.folder), false)
})
