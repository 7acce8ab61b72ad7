import { createHash } from 'node:crypto'
import { getDocument, VerbosityLevel } from 'pdfjs-dist/legacy/build/pdf.mjs'

export interface PdfText {
  pages: string[]
  /** all of it, runs of white space as one space */
  text: string
  sha256: string
}

/** The words of a PDF as a reader sees them. */
export async function readPdf(file: Buffer): Promise<PdfText> {
  const sha256 = createHash('sha256').update(file).digest('hex')
  const loading = getDocument({ data: new Uint8Array(file), verbosity: VerbosityLevel.ERRORS })
  const document = await loading.promise
  const pages: string[] = []
  for (let number = 1; number <= document.numPages; number += 1) {
    const page = await document.getPage(number)
    const { items } = await page.getTextContent()
    const words = items.map((item) => ('str' in item ? `${item.str}${item.hasEOL ? '\n' : ''}` : ''))
    pages.push(words.join('').replace(/\s+/g, ' ').trim())
  }
  await loading.destroy()
  return { pages, text: pages.join(' '), sha256 }
}
