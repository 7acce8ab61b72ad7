// npm test: every suite against throw-away parts; the last line sums up. See `help` for what may be left out.

import { tmpdir } from 'node:os'
import { mkdtempSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { ensureTestBrowser } from './chromium.mjs'
import { startControl } from './control.mjs'
import { addCounts, lastLine, noCounts, oneCheck } from './counts.mjs'
import { startProductOn, startThrowAwayCluster, undoStack } from './launch.mjs'
import { demandNode, ensurePackages } from './packages.mjs'
import { ensurePostgres } from './postgres.mjs'
import { bold, explain, green, quiet, red, Refusal, say, seconds } from './say.mjs'
import { runToEnd } from './signals.mjs'
import { reportFolder, suiteGroups } from './suites.mjs'
import { startWatchdog } from './watchdog.mjs'

const groups = ['lint', 'types', 'small', 'db', 'build', 'browser', 'checks']

const help = `npm test -- [--only=${groups.join(',')}] [-- arguments for the test programs]

  --only=small,db      runs these suites alone
  -- batches           hands 'batches' on to vitest and playwright: only files with that name`

const readArguments = (args) => {
  const cut = args.indexOf('--')
  const own = cut < 0 ? args : args.slice(0, cut)
  const rest = cut < 0 ? [] : args.slice(cut + 1)
  let only = groups
  for (const arg of own) {
    if (!arg.startsWith('--only=')) throw new Refusal(help)
    only = arg.slice('--only='.length).split(',')
    if (only.some((group) => !groups.includes(group))) throw new Refusal(help)
  }
  return { wants: (group) => only.includes(group), rest }
}

const undo = undoStack()
const results = []
const total = () => results.map(({ counts }) => counts).reduce(addCounts, noCounts)

const runSuite = async (suite) => {
  const begun = performance.now()
  say(`${quiet('▶')} ${suite.name}`)
  let result
  try {
    result = await suite.run()
  } catch (error) {
    result = { counts: oneCheck(1), output: `${error.stack ?? error}\n` }
  }
  const { counts, output } = result
  results.push({ name: suite.name, counts })
  const mark = counts.failed > 0 ? red('✘') : green('✔')
  if (output.trim()) say(`\n${bold(`── ${suite.name} ──`)}\n${output.trimEnd()}\n`)
  say(`${mark} ${suite.name}: ${lastLine(counts)} ${quiet(`(${seconds(begun)})`)}`)
  return counts.failed === 0
}

const runAll = async (suites) => {
  for (const suite of suites) await runSuite(suite)
}

const failedSuite = (name, why) => ({ name, run: async () => ({ counts: oneCheck(1), output: `${why}\n` }) })

/** The built product with its demo laboratory and the hand that pulls its plugs, or why there is none. */
const openProduct = async ({ home, cluster, watchdog }) => {
  try {
    const product = await startProductOn({
      cluster,
      home,
      folder: join(home, 'product'),
      accountsFile: join(home, 'demo-accounts.json'),
      undo,
      watchdog,
      onDeath: ({ name, lastLines }) => say(red(`${name} ended by itself:\n${lastLines}`)),
    })
    const control = await startControl(product)
    undo.push(control.stop)
    return { product, controlUrl: control.url }
  } catch (error) {
    const why = error instanceof Refusal ? error.message : (error.stack ?? String(error))
    return { why: `The product did not start.\n${why}` }
  }
}

/** The browser, and the checks of the database that it leaves behind. */
const runOnProduct = async ({ product, controlUrl, why, wants, rest, folder, cluster, chromium }) => {
  if (!product) {
    if (wants('browser')) await runSuite(failedSuite('browser tests', why))
    if (wants('checks')) await runSuite(failedSuite('checks of the seeded database', 'Not run: see above.'))
    return
  }
  if (wants('browser')) await runSuite(suiteGroups.browser({ folder, rest, product, controlUrl, chromium }))
  if (wants('checks')) await runSuite(suiteGroups.checks({ cluster, databaseName: product.databaseName }))
}

const summary = () => {
  say(`\n${bold('Suites')}`)
  for (const { name, counts } of results) {
    say(`  ${counts.failed > 0 ? red('✘') : green('✔')} ${name.padEnd(32)} ${lastLine(counts)}`)
  }
  say('')
}

const work = async () => {
  const { wants, rest } = readArguments(process.argv.slice(2))
  demandNode()
  await ensurePackages()
  const watchdog = startWatchdog()
  const needsProduct = wants('browser') || wants('checks')
  const needsCluster = wants('db') || needsProduct
  if (needsCluster) await ensurePostgres()
  const chromium = wants('browser') ? await ensureTestBrowser() : undefined

  const parts = needsCluster ? await startThrowAwayCluster({ undo, watchdog }) : undefined
  const home = parts?.home ?? mkdtempSync(join(tmpdir(), 'weirlight-'))
  if (!parts) undo.push(() => rmSync(home, { recursive: true, force: true }))
  const folder = reportFolder(home)

  // two lanes for two cores; the other browser tests come after both, alone
  const openWhatIsNeeded = async () => {
    if (!wants('build') && !needsProduct) return undefined
    const isBuilt = await runSuite(suiteGroups.build)
    if (!needsProduct) return undefined
    const opened = isBuilt ? await openProduct({ ...parts, watchdog }) : { why: 'Not run: the build failed.' }
    if (wants('browser') && opened.product) {
      await runSuite(suiteGroups.outages({ ...opened, folder, rest, chromium }))
    }
    return opened
  }
  const openThenSmall = async () => {
    const opened = await openWhatIsNeeded()
    if (wants('small')) await runAll(suiteGroups.small({ folder, rest }))
    return opened
  }
  const [opened] = await Promise.all([
    openThenSmall(),
    runAll([
      ...(wants('db') ? [suiteGroups.database({ folder, rest, cluster: parts?.cluster })] : []),
      ...(wants('lint') ? suiteGroups.lint : []),
      ...(wants('types') ? suiteGroups.types : []),
    ]),
  ])
  if (opened) await runOnProduct({ ...opened, ...parts, wants, rest, folder, chromium })

  summary()
  say(lastLine(total()))
  const { passed, failed } = total()
  return failed > 0 || passed === 0 ? 1 : 0
}

/** Whatever goes wrong before or between the suites, the last line says so. */
const workAndSum = async () => {
  try {
    return await work()
  } catch (error) {
    const code = explain(error)
    say(lastLine(addCounts(total(), oneCheck(1))))
    return code
  }
}

await runToEnd({
  undo,
  work: workAndSum,
  onInterrupt: () => {
    say(lastLine(addCounts(total(), oneCheck(1))))
    return 130
  },
})
