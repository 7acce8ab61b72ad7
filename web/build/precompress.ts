import { readFile, readdir, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { promisify } from 'node:util'
import { brotliCompress, constants, gzip } from 'node:zlib'
import type { Plugin } from 'vite'

const squeeze = { gz: promisify(gzip), br: promisify(brotliCompress) }
const WORTH_IT = /\.(js|css|html|svg|json)$/
const MINIMUM_BYTES = 1024

/** Writes `.gz` and `.br` beside every text asset once, so that the server never compresses while it serves. */
export function precompress(): Plugin {
  let outDir = 'dist'
  return {
    name: 'precompress',
    apply: 'build',
    configResolved: (config) => {
      outDir = join(config.root, config.build.outDir)
    },
    closeBundle: async () => {
      const names = await readdir(outDir, { recursive: true })
      for (const name of names.filter((each) => WORTH_IT.test(each))) {
        const file = join(outDir, name)
        const content = await readFile(file)
        if (content.length < MINIMUM_BYTES) continue
        await writeFile(`${file}.gz`, await squeeze.gz(content, { level: 9 }))
        await writeFile(
          `${file}.br`,
          await squeeze.br(content, { params: { [constants.BROTLI_PARAM_QUALITY]: 10 } }),
        )
      }
    },
  }
}
