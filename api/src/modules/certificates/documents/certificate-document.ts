import type { CertificateSnapshot } from '@weirlight/shared/contracts'
import type { Content, TableCell } from 'pdfmake/interfaces.js'
import { showDay, showTime, type DocumentDefinition } from '../../../platform/index.js'

const INK = '#1B2733'
const QUIET = '#5B6873'
const TONES: Record<string, string> = { above: '#A61B29', below: '#2F6B3A' }

const quiet = (text: string): Content => ({ text, color: QUIET })

/** The certificate as it is printed: from the frozen snapshot alone, so that it can be made again to the letter. */
export function certificateDocument(snapshot: CertificateSnapshot): DocumentDefinition {
  const at = (iso: string) => showTime(new Date(iso), snapshot.timeZone)
  const { laboratory, client, sample } = snapshot
  return {
    title: `${snapshot.title} ${snapshot.number}`,
    createdAt: new Date(snapshot.issuedAt),
    fontSize: 9,
    margins: [42, 42, 42, 64],
    content: [
      {
        columns: [
          {
            stack: [
              { text: `${snapshot.title} ${snapshot.number}`, fontSize: 16, bold: true, color: INK },
              quiet(
                `Issued ${at(snapshot.issuedAt)} · ${snapshot.replaces ? `amendment to ${snapshot.replaces}, which it replaces` : 'replaces nothing'}`,
              ),
            ],
          },
          {
            width: 200,
            alignment: 'right',
            stack: [
              { text: laboratory.name, bold: true },
              quiet(`${laboratory.address} · Accreditation ${laboratory.accreditation}`),
              quiet(`${laboratory.email} · ${laboratory.phone}`),
            ],
          },
        ],
        margin: [0, 0, 0, 14],
      },
      ...(snapshot.replaces ? [changes(snapshot)] : []),
      facts([
        ['For', client.name, 'Sample', `${sample.number}, ${sample.kind}`],
        ['Address', client.address || '–', 'Point', `${sample.point} (${sample.pointCode})`],
        [
          'Contact',
          client.contact || '–',
          'Collected',
          `${at(sample.collectedAt)} by ${sample.collectedBy} ¹`,
        ],
        [
          'System',
          client.systemId || '–',
          'Received',
          `${at(sample.receivedAt)}${sample.temperatureC ? ` at ${sample.temperatureC} °C` : ''}`,
        ],
        [
          'Purpose',
          sample.purpose === 'compliance' ? 'compliance, as asked by the client' : 'operational',
          'Condition',
          condition(sample),
        ],
      ]),
      results(snapshot),
      {
        text: `Analysed ${analysed(snapshot)}. ¹ Information supplied by the client. ${snapshot.notes.join(' ')}`,
        color: QUIET,
        fontSize: 8,
        lineHeight: 1.25,
        margin: [0, 8, 0, 8],
      },
      { text: snapshot.caution, bold: true, fontSize: 9, margin: [0, 0, 0, 10] },
      facts([
        [
          'Reviewed and released',
          `${snapshot.releasedBy}, ${snapshot.releasedByRole}`,
          'At',
          at(snapshot.releasedAt),
        ],
        [
          'Analysts',
          [...new Set(snapshot.results.flatMap((line) => line.analyst.split(', ')))].join(', '),
          'Calculated by',
          `engine ${snapshot.engineVersion}`,
        ],
      ]),
      { text: 'End of certificate', alignment: 'right', color: QUIET, fontSize: 8, margin: [0, 10, 0, 0] },
    ],
    footer: {
      margin: [42, 8, 42, 0],
      fontSize: 8,
      color: QUIET,
      columns: [
        {
          stack: [
            { text: 'Not to be reproduced except in full.' },
            { text: `Check this certificate: ${snapshot.checkUrl} · ${snapshot.verificationCode}` },
          ],
        },
        { width: 90, alignment: 'right', text: `${snapshot.number}\nPage {page} of {pages}` },
      ],
    },
  }
}

function condition(sample: CertificateSnapshot['sample']): string {
  const kept =
    {
      none: 'not preserved',
      'nitric-acid': 'nitric acid',
      'ammonium-sulfate-buffer': 'ammonium sulfate buffer',
    }[sample.preservation] ?? sample.preservation
  const parts = [
    kept,
    sample.ph ? `pH ${sample.ph}` : '',
    sample.condition,
    sample.qualification ? `qualified: ${sample.qualification}` : '',
  ]
  return parts.filter(Boolean).join(', ')
}

function analysed(snapshot: CertificateSnapshot): string {
  const days = snapshot.results.map((line) => showDay(new Date(line.analysedAt), snapshot.timeZone)).sort()
  const [first, last] = [days[0] ?? '', days.at(-1) ?? '']
  return first === last ? first : `${first} to ${last}`
}

function facts(rows: [string, string, string, string][]): Content {
  return {
    table: {
      widths: [62, '*', 62, '*'],
      body: rows.map(([a, b, c, d]) => [quiet(a) as TableCell, b, quiet(c) as TableCell, d]),
    },
    layout: 'noBorders',
    margin: [0, 0, 0, 10],
  }
}

function results(snapshot: CertificateSnapshot): Content {
  const head = ['Determination', 'Result', 'U (k = 2)', 'Unit', 'Quantif. limit', 'Limit', 'Statement']
  return {
    table: {
      headerRows: 1,
      dontBreakRows: true,
      widths: ['*', 48, 48, 34, 56, 74, 70],
      body: [
        head.map(
          (text, index) =>
            ({
              text,
              color: QUIET,
              fontSize: 8,
              alignment: index >= 1 && index <= 4 && index !== 3 ? 'right' : 'left',
            }) as TableCell,
        ),
        ...snapshot.results.map((line): TableCell[] => [
          {
            stack: [
              { text: line.determination },
              { text: line.method, color: QUIET, fontSize: 8 },
              { text: line.edition, color: QUIET, fontSize: 7 },
            ],
          },
          { text: line.text, bold: true, alignment: 'right' },
          { text: line.uncertaintyText, alignment: 'right' },
          line.unit,
          { text: line.quantificationLimit, alignment: 'right' },
          line.limitValue
            ? {
                stack: [
                  { text: `${line.limitValue} ${line.limitUnit}` },
                  { text: line.limitName, color: QUIET, fontSize: 7 },
                ],
              }
            : 'none',
          statement(line),
        ]),
      ],
    },
    layout: 'lightHorizontalLines',
    margin: [0, 4, 0, 4],
  }
}

/** A shape beside the word, drawn, so that it does not hang on colour or a font. */
function statement(line: CertificateSnapshot['results'][number]): TableCell {
  const isAbove = line.verdict === 'above' || line.verdict === 'conditional-above'
  const color = isAbove ? (TONES['above'] ?? INK) : line.verdict === null ? QUIET : (TONES['below'] ?? INK)
  const shape = isAbove
    ? `<svg width="9" height="9"><path d="M4.5 0.5 L9 8.5 L0 8.5 Z" fill="${color}"/></svg>`
    : `<svg width="9" height="9"><circle cx="4.5" cy="4.5" r="4" fill="${color}"/></svg>`
  return {
    columns: [
      { svg: shape, width: 12 },
      { text: line.statement, color, bold: true },
    ],
  }
}

function changes(snapshot: CertificateSnapshot): Content {
  return {
    stack: [
      { text: `What was amended, and why: ${snapshot.replacementReason}`, bold: true, margin: [0, 0, 0, 4] },
      {
        table: {
          widths: ['*', '*', '*'],
          body: [
            [quiet('What') as TableCell, quiet('Was') as TableCell, quiet('Is') as TableCell],
            ...(snapshot.changes.length === 0
              ? [[{ text: 'No number changed.', colSpan: 3 }, '', ''] as TableCell[]]
              : snapshot.changes.map((change): TableCell[] => [change.what, change.was, change.is])),
          ],
        },
        layout: 'lightHorizontalLines',
      },
    ],
    margin: [0, 0, 0, 12],
  }
}
