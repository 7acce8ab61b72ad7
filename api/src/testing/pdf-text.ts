import { getDocument } from 'pdfjs-dist/legacy/build/pdf.mjs'

/** The text of each page, as it is drawn. */
export async function pdfPages(pdf: Buffer): Promise<string[]> {
  const document = await getDocument({ data: new Uint8Array(pdf), useSystemFonts: false, verbosity: 0 })
    .promise
  const pages: string[] = []
  for (let n = 1; n <= document.numPages; n += 1) {
    const content = await (await document.getPage(n)).getTextContent()
    pages.push(content.items.map((item) => ('str' in item ? item.str : '')).join(' '))
  }
  await document.destroy()
  return pages
}

/** Without spaces and line breaks, which a layout puts where it likes; µ and μ are drawn alike and read back as one. */
export const packed = (text: string): string => text.normalize('NFKC').replaceAll(/\s+/g, '')
