import type { ValidationCheck, ValidationReport } from '@weirlight/shared/assay'
import type { Content, TableCell } from 'pdfmake/interfaces.js'
import type { DocumentDefinition } from '../../../platform/index.js'

const QUIET = '#5B6873'
const ABOVE = '#A61B29'

const show = (value: unknown) => (value === null || value === undefined ? '–' : String(value))

/** The evidence a laboratory keeps of its calculations: every case with its source, expected, got and verdict. */
export function validationDocument(
  report: ValidationReport,
  given: { laboratory: string; by: string },
): DocumentDefinition {
  const sources = new Map<string, typeof report.rows>()
  for (const row of report.rows) sources.set(row.source, [...(sources.get(row.source) ?? []), row])
  return {
    title: `Validation of the calculations, engine ${report.engineVersion}`,
    createdAt: new Date(report.at),
    fontSize: 7.5,
    isLandscape: true,
    content: [
      { text: 'Validation of the calculations', fontSize: 16, bold: true },
      {
        text: `${given.laboratory} · run ${report.at} by ${given.by} · engine ${report.engineVersion}`,
        color: QUIET,
        margin: [0, 2, 0, 8],
      },
      {
        text: `${report.cases} cases, ${report.comparisons} comparisons: ${report.passed} passed, ${report.failed} failed.`,
        fontSize: 11,
        bold: true,
        color: report.failed > 0 ? ABOVE : '#1B2733',
        margin: [0, 0, 0, 8],
      },
      {
        text: 'Each case gives a function of the engine the published data and compares what it returns with the published answer. The mark says how the answer is known: read in the document, read second-hand, from memory, computed, common practice of the trade, or constructed.',
        margin: [0, 0, 0, 10],
      },
      ...failures(report),
      ...[...sources].flatMap(([source, rows]): Content[] => [
        { text: source, bold: true, fontSize: 8.5, margin: [0, 8, 0, 2] },
        table(
          rows.flatMap((row) => row.checks.map((check, index) => line({ row, check, isFirst: index === 0 }))),
        ),
      ]),
    ],
    footer: {
      margin: [48, 16, 48, 0],
      fontSize: 7.5,
      color: QUIET,
      columns: [
        { text: `Engine ${report.engineVersion}, ${report.at}` },
        { text: 'Page {page} of {pages}', alignment: 'right' },
      ],
    },
  }
}

/** What failed stands first, where nobody has to look for it among some hundred pages. */
function failures(report: ValidationReport): Content[] {
  const failed = report.rows.filter((row) => row.verdict === 'fail')
  if (failed.length === 0) return []
  return [
    { text: 'Failed', bold: true, fontSize: 11, color: ABOVE, margin: [0, 4, 0, 2] },
    {
      text: 'Do not release results with these calculations until each is explained.',
      margin: [0, 0, 0, 4],
    },
    table(
      failed.flatMap((row) =>
        row.checks
          .filter((check) => check.verdict === 'fail')
          .map((check, index) => line({ row, check, isFirst: index === 0 })),
      ),
    ),
  ]
}

function table(lines: TableCell[][]): Content {
  const heads = ['Case', 'Function · value', 'Expected', 'Got', 'Difference', 'Tolerance', 'Verdict']
  return {
    table: {
      headerRows: 1,
      widths: ['*', 110, 80, 80, 55, 55, 34],
      body: [heads.map((text) => ({ text, color: QUIET }) as TableCell), ...lines],
    },
    layout: 'lightHorizontalLines',
  }
}

function line(given: {
  row: ValidationReport['rows'][number]
  check: ValidationCheck
  isFirst: boolean
}): TableCell[] {
  const { row, check, isFirst } = given
  const isFailed = check.verdict === 'fail'
  return [
    isFirst ? `${row.title} (${row.mark})` : '',
    `${row.function} · ${check.path}`,
    show(check.expected),
    show(check.got),
    check.difference === null ? '–' : check.difference.toExponential(2),
    check.tolerance === null ? 'equal' : check.tolerance.toExponential(2),
    { text: check.verdict, bold: isFailed, ...(isFailed ? { color: ABOVE } : {}) },
  ]
}
