import type { CertificateSnapshot } from '@weirlight/shared/contracts'
import type pg from 'pg'
import { certificateDocument } from '../modules/certificates/documents/certificate-document.js'
import { DocumentsService } from '../platform/documents/documents.service.js'
import renderBare from '../platform/documents/pdf-worker.js'
import { loadByHand } from './load.js'
import type { Measured } from './measured.js'

const CERTIFICATES = 60

/** Certificates of the demo laboratory, laid out anew: by the product's pool of threads, and by pdfmake alone. */
export async function measureCertificates(pool: pg.Pool): Promise<Measured[]> {
  const { rows } = await pool.query<{ snapshot: CertificateSnapshot }>(
    'select snapshot from certificates order by id desc limit $1',
    [CERTIFICATES],
  )
  const snapshotOf = (turn: number) => {
    const row = rows[turn % rows.length]
    if (!row) throw new Error('The demo laboratory has issued no certificate.')
    return row.snapshot
  }
  const facts = { atATime: 1, requests: CERTIFICATES }
  const documents = new DocumentsService()
  try {
    const render = (_: number, turn: number) => documents.render(certificateDocument(snapshotOf(turn)))
    await loadByHand({ ...facts, name: 'warm-up', requests: 5, work: render })
    const byPool = await loadByHand({ ...facts, name: 'Rendering a certificate', work: render })
    const alone = (_: number, turn: number) => renderBare(certificateDocument(snapshotOf(turn)))
    await loadByHand({ ...facts, name: 'warm-up', requests: 5, work: alone })
    return [byPool, await loadByHand({ ...facts, name: 'the same PDF by pdfmake alone', work: alone })]
  } finally {
    await documents.onApplicationShutdown()
  }
}
