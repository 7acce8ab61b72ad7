import pdfmake from 'pdfmake'
import type { Content, TDocumentDefinitions } from 'pdfmake/interfaces.js'
import roboto from 'pdfmake/fonts/Roboto.js'
import type { DocumentDefinition } from './document.js'

const fontFiles = new Set(Object.values(roboto.Roboto))

pdfmake.setFonts(roboto)
// Nothing of a document comes from elsewhere: no address is called, no file is read but the fonts.
pdfmake.setUrlAccessPolicy(() => false)
pdfmake.setLocalAccessPolicy((path) => fontFiles.has(path))

/** Runs in a thread of its own. */
export default async function render(definition: DocumentDefinition): Promise<Uint8Array> {
  return pdfmake.createPdf(toPdfmake(definition)).getBuffer()
}

function toPdfmake(definition: DocumentDefinition): TDocumentDefinitions {
  const { header, footer } = definition
  return {
    pageSize: 'A4',
    pageOrientation: definition.isLandscape ? 'landscape' : 'portrait',
    pageMargins: definition.margins ?? [48, 56, 48, 64],
    content: definition.content,
    defaultStyle: {
      font: 'Roboto',
      fontSize: definition.fontSize ?? 9.5,
      lineHeight: definition.lineHeight ?? 1.15,
    },
    styles: definition.styles ?? {},
    info: {
      producer: 'Weirlight',
      creator: 'Weirlight',
      ...definition.info,
      title: definition.title,
      creationDate: definition.createdAt,
      modDate: definition.createdAt,
    },
    ...(header === undefined
      ? {}
      : { header: (page: number, pages: number) => numbered(header, { page, pages }) }),
    ...(footer === undefined
      ? {}
      : { footer: (page: number, pages: number) => numbered(footer, { page, pages }) }),
    ...(definition.watermark
      ? { watermark: { text: definition.watermark, color: '#7a2030', opacity: 0.12, bold: true } }
      : {}),
  }
}

/** A fresh copy for each page: pdfmake writes into what it lays out. */
function numbered(content: Content, at: { page: number; pages: number }): Content {
  const text = JSON.stringify(content)
    .replaceAll('{page}', String(at.page))
    .replaceAll('{pages}', String(at.pages))
  return JSON.parse(text) as Content
}
