import { chmodSync, existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { checkoutHash, inData, root } from './paths.mjs'
import { canServerReach, ensurePostgres } from './postgres-binaries.mjs'
import { Refusal } from './say.mjs'

const outside = '/var/lib/weirlight'

const pointer = () => inData('cluster-home')

/** A home outside is this checkout's only when both say so: a copied `.data` must not share a server. */
const pointedHome = () => {
  if (!existsSync(pointer())) return undefined
  const home = readFileSync(pointer(), 'utf8').trim()
  const owner = join(home, 'checkout')
  return existsSync(owner) && readFileSync(owner, 'utf8').trim() === root ? home : undefined
}

/**
 * The home of this checkout's own cluster: in `.data`, or, where the server's account cannot get into the
 * checkout (root's own folder, say), under /var/lib/weirlight.
 */
export const checkoutHome = async () => {
  mkdirSync(inData(), { recursive: true })
  const inside = inData('postgres')
  if (existsSync(inside)) return inside
  const pointed = pointedHome()
  if (pointed) return pointed
  if (await canServerReach(await ensurePostgres(), inData())) return inside

  mkdirSync(outside, { recursive: true, mode: 0o711 })
  const home = mkdtempSync(join(outside, `${checkoutHash}-`))
  writeFileSync(join(home, 'checkout'), `${root}\n`)
  writeFileSync(pointer(), `${home}\n`)
  return home
}

/** A new folder for things that are removed at the end, where the server's account can get into it. */
export const throwAwayFolder = async () => {
  const postgres = await ensurePostgres()
  for (const parent of [tmpdir(), '/tmp', '/var/tmp']) {
    const folder = mkdtempSync(join(parent, 'weirlight-'))
    chmodSync(folder, 0o711)
    if (await canServerReach(postgres, folder)) return folder
    rmSync(folder, { recursive: true })
  }
  throw new Refusal(
    `PostgreSQL's account can get into neither ${tmpdir()} nor /var/tmp for a throw-away cluster.`,
  )
}
