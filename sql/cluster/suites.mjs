import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { buildOne, staleBuilds } from './build.mjs'
import { noCounts, oneCheck, playwrightCounts, settle, tapCounts, vitestCounts } from './counts.mjs'
import { inRoot, root } from './paths.mjs'
import { run } from './processes.mjs'

const bin = (...parts) => inRoot('node_modules', ...parts)

const node = (args, options = {}) => run(process.execPath, args, { cwd: root, ...options })

const readReport = (file, read) => {
  try {
    return read(JSON.parse(readFileSync(file, 'utf8')))
  } catch {
    return undefined
  }
}

/** A tool whose exit code is its verdict. */
const tool = (name, args, options) => ({
  name,
  run: async () => {
    const answer = await node(args, options)
    return { counts: oneCheck(answer.code), output: answer.output }
  },
})

const lint = [
  tool('eslint', [bin('eslint', 'bin', 'eslint.js'), '--max-warnings=0', '.']),
  tool('prettier', [bin('prettier', 'bin', 'prettier.cjs'), '--check', '--log-level=warn', '.']),
  tool('import rules', [
    bin('dependency-cruiser', 'bin', 'dependency-cruise.mjs'),
    ...['--config', '.dependency-cruiser.mjs', 'shared/src', 'api/src', 'web/src', 'e2e'],
  ]),
]

const types = ['shared', 'api', 'web', 'e2e'].map((workspace) =>
  tool(`types of ${workspace}`, [bin('typescript', 'bin', 'tsc'), '-p', workspace, '--noEmit']),
)

const vitest = ({ name, workspace, args = [], rest, env, folder }) => ({
  name,
  run: async () => {
    const report = join(folder, `${name.replaceAll(' ', '-')}.json`)
    rmSync(report, { force: true })
    const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${report}`]
    const answer = await node([bin('vitest', 'vitest.mjs'), 'run', ...reporters, ...args, ...rest], {
      cwd: inRoot(workspace),
      env: { ...process.env, ...env },
    })
    const counts = readReport(report, vitestCounts)
    // Files asked for by name need not be in every suite.
    if (rest.length > 0 && counts && counts.passed + counts.failed === 0) return { counts, output: '' }
    return { counts: settle({ counts, code: answer.code }), output: answer.output }
  },
})

const launcherTests = ({ folder }) => ({
  name: 'tests of the launcher',
  run: async () => {
    const report = join(folder, 'launcher.tap')
    const reporters = ['spec', 'stdout', 'tap', report].map((value, index) =>
      index % 2 === 0 ? `--test-reporter=${value}` : `--test-reporter-destination=${value}`,
    )
    const answer = await node(['--test', ...reporters, inRoot('sql', 'cluster', 'cluster.spec.mjs')])
    const counts = existsSync(report) ? tapCounts(readFileSync(report, 'utf8')) : undefined
    return { counts: settle({ counts, code: answer.code }), output: answer.output }
  },
})

const small = ({ folder, rest }) => [
  launcherTests({ folder }),
  vitest({ name: 'small tests of shared', workspace: 'shared', rest, folder }),
  vitest({
    name: 'small tests of api',
    workspace: 'api',
    args: ['--project=small'],
    rest,
    folder,
  }),
  vitest({ name: 'small tests of web', workspace: 'web', rest, folder }),
]

/** The tests clone databases and try both roles, so they need the superuser's address beside the others'. */
const database = ({ folder, rest, cluster }) =>
  vitest({
    name: 'database tests',
    workspace: 'api',
    args: ['--project=db'],
    rest,
    env: {
      TEST_ADMIN_URL: cluster.url('admin', 'postgres'),
      TEST_OWNER_URL: cluster.url('owner', 'postgres'),
      TEST_APP_URL: cluster.url('app', 'postgres'),
    },
    folder,
  })

/** Builds what is not already built from exactly these sources. */
const build = {
  name: 'production build',
  run: async () => {
    try {
      for (const stale of staleBuilds()) await buildOne(stale)
      return { counts: oneCheck(0), output: '' }
    } catch (error) {
      return { counts: oneCheck(1), output: `${error.message}\n` }
    }
  },
}

const playwright = ({ name, project, env, folder, rest, product, controlUrl, chromium }) => ({
  name,
  run: async () => {
    const report = join(folder, `${name.replaceAll(' ', '-')}.json`)
    const args = [
      bin('@playwright', 'test', 'cli.js'),
      'test',
      `--project=${project}`,
      '--retries=0',
      '--reporter=list,json',
      // Files asked for by name need not be in every suite.
      ...(rest.length > 0 ? ['--pass-with-no-tests', ...rest] : []),
    ]
    const answer = await node(args, {
      cwd: inRoot('e2e'),
      env: {
        ...process.env,
        CHROMIUM_PATH: chromium,
        E2E_ACCOUNTS_FILE: product.accountsFile,
        E2E_CONTROL_URL: controlUrl,
        E2E_OWNER_DATABASE_URL: product.ownerUrl,
        PLAYWRIGHT_JSON_OUTPUT_FILE: report,
        PLAYWRIGHT_JSON_OUTPUT_NAME: report,
        ...env,
      },
      isEchoed: true,
    })
    const counts = readReport(report, playwrightCounts)
    if (rest.length > 0 && answer.code === 0 && !counts?.passed) return { counts: noCounts, output: '' }
    return { counts: settle({ counts, code: answer.code }), output: '' }
  },
})

const browser = (given) => playwright({ ...given, name: 'browser tests', project: 'work' })

/** Mostly waits, while others keep the machine busy: more patience before it gives up. */
const outages = (given) =>
  playwright({
    ...given,
    name: 'browser tests of outages',
    project: 'outages',
    env: { E2E_PATIENCE: '3', ...process.env },
  })

const checksFolder = () => inRoot('sql', 'checks')

/** Each file of sql/checks returns no rows on a healthy database. */
const checks = ({ cluster, databaseName }) => ({
  name: 'checks of the seeded database',
  run: async () => {
    const files = existsSync(checksFolder())
      ? readdirSync(checksFolder()).filter((f) => f.endsWith('.sql'))
      : []
    const counts = { ...noCounts }
    const output = []
    for (const file of files.sort()) {
      const rows = await cluster
        .sql(readFileSync(join(checksFolder(), file), 'utf8'), { database: databaseName, role: 'owner' })
        .catch((error) => error.message)
      counts[rows === '' ? 'passed' : 'failed'] += 1
      if (rows !== '')
        output.push(`sql/checks/${file} returned:\n${rows.split('\n').slice(0, 20).join('\n')}\n`)
    }
    return { counts: settle({ counts, code: 0 }), output: output.join('\n') }
  },
})

export const suiteGroups = { lint, types, small, database, build, browser, outages, checks }

export const reportFolder = (home) => {
  const folder = join(home, 'reports')
  mkdirSync(folder, { recursive: true })
  return folder
}
