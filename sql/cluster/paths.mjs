import { createHash } from 'node:crypto'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'

/** The checkout's own folder. */
export const root = join(dirname(fileURLToPath(import.meta.url)), '..', '..')

/** Everything this checkout keeps between starts; git-ignored. */
export const dataDir = join(root, '.data')

export const checkoutHash = createHash('sha256').update(root).digest('hex').slice(0, 12)

export const inRoot = (...parts) => join(root, ...parts)
export const inData = (...parts) => join(dataDir, ...parts)
