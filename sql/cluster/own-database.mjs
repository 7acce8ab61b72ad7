import { createHash } from 'node:crypto'
import { createReadStream } from 'node:fs'
import { pipeline } from 'node:stream/promises'
import { takeLock, whatRuns } from './lock.mjs'
import { checkoutHome } from './places.mjs'
import { attachCluster, hasCluster, startCluster } from './postgres.mjs'
import { startWatchdog } from './watchdog.mjs'

export { hasCluster }

/**
 * This checkout's own cluster for a command that passes by: the running one when `npm start` runs, otherwise
 * started for the length of the command.
 */
export const borrowCluster = async ({ command, undo }) => {
  const home = await checkoutHome()
  const holder = whatRuns()
  if (holder?.url) return { home, holder, cluster: await attachCluster(home) }
  const lock = takeLock(command)
  undo.push(lock.release)
  const cluster = await startCluster({ home, watchdog: startWatchdog() })
  undo.push(cluster.stop)
  return { home, cluster }
}

/** An address of PostgreSQL as the environment that its own programs read: not shown in a list of processes. */
export const environmentOf = (address) => {
  const url = new URL(address)
  const sslmode = url.searchParams.get('sslmode')
  return {
    PGHOST: url.hostname,
    PGPORT: url.port || '5432',
    PGUSER: decodeURIComponent(url.username),
    PGPASSWORD: decodeURIComponent(url.password),
    PGDATABASE: decodeURIComponent(url.pathname.slice(1)),
    ...(sslmode ? { PGSSLMODE: sslmode } : {}),
  }
}

export const sha256Of = async (file) => {
  const hash = createHash('sha256')
  await pipeline(createReadStream(file), hash)
  return hash.digest('hex')
}
