// npm run bench: measures the product, with the demo laboratory, on throw-away parts.

import { existsSync } from 'node:fs'
import { prepare, startProduct, undoStack } from './launch.mjs'
import { inRoot } from './paths.mjs'
import { run } from './processes.mjs'
import { Refusal } from './say.mjs'
import { runToEnd } from './signals.mjs'

const program = () => inRoot('api', 'dist', 'bench', 'bench.js')
const undo = undoStack()

const work = async () => {
  await prepare()
  if (!existsSync(program())) throw new Refusal('There is no bench yet: api/src/bench/bench.ts is missing.')
  const product = await startProduct({ undo })
  const answer = await run(process.execPath, ['--enable-source-maps', program(), ...process.argv.slice(2)], {
    cwd: inRoot(),
    isEchoed: true,
    env: {
      ...process.env,
      NODE_ENV: 'production',
      BENCH_URL: product.url,
      DEMO_ACCOUNTS_FILE: product.accountsFile,
      DATABASE_URL: product.databaseUrl,
      OWNER_DATABASE_URL: product.ownerUrl,
      WEB_DIST: inRoot('web', 'dist'),
    },
  })
  return answer.code
}

await runToEnd({ undo, work })
