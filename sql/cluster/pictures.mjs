// npm run pictures: a screenshot of every screen for each role, into e2e/pictures (git-ignored).

import { existsSync } from 'node:fs'
import { ensureChromium } from './chromium.mjs'
import { prepare, startProduct, undoStack } from './launch.mjs'
import { inRoot } from './paths.mjs'
import { run } from './processes.mjs'
import { Refusal } from './say.mjs'
import { runToEnd } from './signals.mjs'

const undo = undoStack()

const work = async () => {
  await prepare()
  const chromium = await ensureChromium()
  if (!existsSync(inRoot('e2e', 'pictures.config.ts'))) {
    throw new Refusal('There are no pictures to take yet: e2e/pictures.config.ts is missing.')
  }
  const product = await startProduct({ undo })
  const program = inRoot('node_modules', '@playwright', 'test', 'cli.js')
  const answer = await run(
    process.execPath,
    [program, 'test', '--config=pictures.config.ts', ...process.argv.slice(2)],
    {
      cwd: inRoot('e2e'),
      isEchoed: true,
      env: { ...process.env, CHROMIUM_PATH: chromium, E2E_ACCOUNTS_FILE: product.accountsFile },
    },
  )
  return answer.code
}

await runToEnd({ undo, work })
