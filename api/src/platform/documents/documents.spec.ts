import { getDocument } from 'pdfjs-dist/legacy/build/pdf.mjs'
import { afterAll, describe, expect, it } from 'vitest'
import { chartSvg } from './chart-svg.js'
import { DocumentsService } from './documents.service.js'

const documents = new DocumentsService()
afterAll(() => documents.onApplicationShutdown())

async function textOf(pdf: Buffer): Promise<string[]> {
  const read = await getDocument({ data: new Uint8Array(pdf), useSystemFonts: false, verbosity: 0 }).promise
  const pages: string[] = []
  for (let n = 1; n <= read.numPages; n += 1) {
    const content = await (await read.getPage(n)).getTextContent()
    pages.push(content.items.map((item) => ('str' in item ? item.str : '')).join(''))
  }
  return pages
}

const base = { title: 'Certificate', createdAt: new Date('2026-12-01T10:00:00Z') }

describe('documents', () => {
  it('lays out text with the signs of the trade, numbers pages and draws a chart', async () => {
    const svg = chartSvg(
      {
        xAxis: { type: 'value', name: 'mg/L' },
        yAxis: { type: 'value', name: 'absorbance' },
        series: [
          {
            type: 'line',
            data: [
              [0, 0.01],
              [1, 0.21],
              [2, 0.4],
            ],
          },
        ],
      },
      { width: 400, height: 240 },
    )
    expect(svg).toMatch(/^<svg[\s\S]*absorbance/)
    const pdf = await documents.render({
      ...base,
      content: [
        { text: 'Iron 0.312 ± 0.018 mg/L ≤ 0.3, ε = 11 100, 20 µm, λ 510 nm' },
        { svg, width: 400 },
        { text: 'Second page', pageBreak: 'before' },
      ],
      footer: { text: 'Page {page} of {pages}', alignment: 'center' },
    })
    expect(pdf.subarray(0, 5).toString()).toBe('%PDF-')
    const [first, second] = await textOf(pdf)
    // the font draws the micro sign and the Greek letter alike, so they read back as one
    expect(first?.normalize('NFKC')).toContain(
      'Iron 0.312 ± 0.018 mg/L ≤ 0.3, ε = 11 100, 20 µm, λ 510 nm'.normalize('NFKC'),
    )
    expect(first).toContain('Page 1 of 2')
    expect(second).toContain('Page 2 of 2')
  })

  it('reads no file and calls no address', async () => {
    const local = documents.render({ ...base, content: [{ image: '/etc/hostname' }] })
    await expect(local).rejects.toThrow()
    const away = documents.render({
      ...base,
      content: [{ image: 'logo' }, 'x'],
      ...({ images: { logo: 'http://127.0.0.1:1/logo.png' } } as object),
    })
    await expect(away).rejects.toThrow()
  })
})
