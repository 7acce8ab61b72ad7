// npm run bench: measures the product, with the demo laboratory, on throw-away parts; the numbers are kept in .data/bench.

import { prepare, startProduct, undoStack } from './launch.mjs'
import { inData, inRoot } from './paths.mjs'
import { run } from './processes.mjs'
import { runToEnd } from './signals.mjs'

const program = inRoot('api', 'dist', 'bench', 'bench.js')
const undo = undoStack()

const work = async () => {
  await prepare()
  // the valve against floods would measure itself
  const product = await startProduct({ undo, apiEnv: { RATE_LIMIT: '0' } })
  const answer = await run(process.execPath, ['--enable-source-maps', program], {
    cwd: inRoot(),
    isEchoed: true,
    env: {
      ...process.env,
      NODE_ENV: 'production',
      BENCH_THROW_AWAY: '1',
      BENCH_FOLDER: inData('bench'),
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
