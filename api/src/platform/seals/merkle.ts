import { createHash } from 'node:crypto'

/** Merkle trees as RFC 9162, section 2.1.1 defines them, with SHA-256. */
export function leafHash(data: Buffer | string): Buffer {
  return createHash('sha256').update(Buffer.of(0)).update(data).digest()
}

export function nodeHash(left: Buffer, right: Buffer): Buffer {
  return createHash('sha256').update(Buffer.of(1)).update(left).update(right).digest()
}

/** Adds leaf after leaf and holds only one hash a level: the whole subtrees to the left of the next leaf. */
export class MerkleTree {
  private readonly subtrees: { hash: Buffer; size: number }[] = []
  private count = 0

  get size(): number {
    return this.count
  }

  add(data: Buffer | string): void {
    let hash = leafHash(data)
    let size = 1
    for (let last = this.subtrees.at(-1); last?.size === size; last = this.subtrees.at(-1)) {
      hash = nodeHash(last.hash, hash)
      size *= 2
      this.subtrees.pop()
    }
    this.subtrees.push({ hash, size })
    this.count += 1
  }

  root(): Buffer {
    const last = this.subtrees.at(-1)
    if (!last) return createHash('sha256').digest()
    return this.subtrees.slice(0, -1).reduceRight((right, { hash }) => nodeHash(hash, right), last.hash)
  }
}

/** The head before the first seal. */
export const NO_HEAD = Buffer.alloc(32)

export interface SealContent {
  number: bigint
  firstId: bigint
  lastId: bigint
  entries: bigint
  root: Buffer
}

/** Chains a seal to the one before it: SHA-256 over 02, the earlier head, four 8-byte numbers and the root. */
export function sealHead(previousHead: Buffer, seal: SealContent): Buffer {
  const numbers = Buffer.alloc(32)
  numbers.writeBigInt64BE(seal.number, 0)
  numbers.writeBigInt64BE(seal.firstId, 8)
  numbers.writeBigInt64BE(seal.lastId, 16)
  numbers.writeBigInt64BE(seal.entries, 24)
  return createHash('sha256')
    .update(Buffer.of(2))
    .update(previousHead)
    .update(numbers)
    .update(seal.root)
    .digest()
}
