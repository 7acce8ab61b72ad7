import { createHash } from 'node:crypto'
import { describe, expect, it } from 'vitest'
import { MerkleTree } from './merkle.js'

// The eight leaves and roots that implementations of RFC 6962 (whose hashing RFC 9162 keeps) test with;
// from memory, confirmed by the independent recursion below.
const LEAVES = [
  '',
  '00',
  '10',
  '2021',
  '3031',
  '40414243',
  '5051525354555657',
  '606162636465666768696a6b6c6d6e6f',
].map((hex) => Buffer.from(hex, 'hex'))
const ROOTS = [
  '6e340b9cffb37a989ca544e6bb780a2c78901d3fb33738768511a30617afa01d',
  'fac54203e7cc696cf0dfcb42c92a1d9dbaf70ad9e621f4bd8d98662f00e3c125',
  'aeb6bcfe274b70a14fb067a5e5578264db0fa9b51af5e0ba159158f329e06e77',
  'd37ee418976dd95753c1c73862b9398fa2a2cf9b4ff0fdfe8b30cd95209614b7',
  '4e3bbb1f7b478dcfe71fb631631519a3bca12c9aefca1612bfce4c13a86264d4',
  '76e67dadbcdf1e10e1b74ddc608abd2f98dfb16fbce75277b5232a127f2087ef',
  'ddb89be403809e325750d3d263cd78929c2942b7942a34b77e122c9594a74c8c',
  '5dc9da79a70659a9ad559cb701ded9a2ab9d823aad2f4960cfe370eff4604328',
]

/** The definition of RFC 9162, section 2.1.1, word for word: split at the largest power of two below n. */
function byDefinition(leaves: readonly Buffer[]): string {
  const hash = (...parts: Buffer[]) => createHash('sha256').update(Buffer.concat(parts)).digest()
  const [only] = leaves
  if (only === undefined) return hash().toString('hex')
  if (leaves.length === 1) return hash(Buffer.of(0), only).toString('hex')
  let k = 1
  while (k * 2 < leaves.length) k *= 2
  const left = Buffer.from(byDefinition(leaves.slice(0, k)), 'hex')
  const right = Buffer.from(byDefinition(leaves.slice(k)), 'hex')
  return hash(Buffer.of(1), left, right).toString('hex')
}

function rootOf(leaves: readonly Buffer[]): string {
  const tree = new MerkleTree()
  for (const leaf of leaves) tree.add(leaf)
  return tree.root().toString('hex')
}

describe('Merkle trees (RFC 9162)', () => {
  it('gives the hash of nothing for an empty tree', () => {
    // SHA-256 of the empty string, FIPS 180-4
    expect(rootOf([])).toBe('e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855')
  })

  it.each(ROOTS.map((root, index) => ({ root, size: index + 1 })))(
    'gives the known root of $size leaves',
    ({ root, size }) => {
      const leaves = LEAVES.slice(0, size)
      expect(rootOf(leaves)).toBe(root)
      expect(byDefinition(leaves)).toBe(root)
    },
  )

  it('agrees with the definition for every size to 130 (constructed)', () => {
    const leaves = Array.from({ length: 130 }, (_, n) => Buffer.from(`entry ${n}`))
    for (let size = 0; size <= leaves.length; size += 1) {
      const some = leaves.slice(0, size)
      expect(rootOf(some)).toBe(byDefinition(some))
    }
  })
})
