import { readFile } from 'node:fs/promises'
import { fileURLToPath } from 'node:url'
import { transform } from '@swc/core'

const options = {
  swcrc: false,
  sourceMaps: 'inline',
  jsc: {
    parser: { syntax: 'typescript', decorators: true },
    transform: { legacyDecorator: true, decoratorMetadata: true, useDefineForClassFields: false },
    target: 'es2022',
    keepClassNames: true,
  },
  module: { type: 'es6' },
}

/** The sources import `./x.js`, as they will be called once built. */
export async function resolve(specifier, context, next) {
  const isOwn = specifier.startsWith('.') && specifier.endsWith('.js') && context.parentURL?.endsWith('.ts')
  return next(isOwn ? specifier.replace(/\.js$/, '.ts') : specifier, context)
}

export async function load(url, context, next) {
  if (!url.endsWith('.ts')) return next(url, context)
  const filename = fileURLToPath(url)
  const { code } = await transform(await readFile(filename, 'utf8'), { ...options, filename })
  return { format: 'module', source: code, shortCircuit: true }
}
