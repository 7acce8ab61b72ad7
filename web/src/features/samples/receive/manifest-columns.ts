export interface ManifestColumn {
  title: string
  isRequired: boolean
  what: string
}

/** As the server reads them; capitals and spaces do not matter. */
export const MANIFEST_COLUMNS: readonly ManifestColumn[] = [
  { title: 'Client', isRequired: true, what: 'Code or name of the client' },
  { title: 'Sampling point', isRequired: true, what: 'Code or name of one of its points' },
  { title: 'Purpose', isRequired: true, what: 'compliance, operational' },
  { title: 'Kind', isRequired: false, what: 'routine (when empty), confirmation, raw, process, special' },
  { title: 'Collected at', isRequired: true, what: '2026-12-01 14:05, by the laboratory’s clock' },
  { title: 'Collected by', isRequired: true, what: 'Name' },
  { title: 'Received at', isRequired: false, what: '2026-12-01 16:40; now, when empty' },
  { title: 'Preservation', isRequired: true, what: 'none, nitric acid, ammonium sulfate buffer' },
  { title: 'pH', isRequired: false, what: 'As read; empty when not measured' },
  { title: 'Temperature, °C', isRequired: false, what: 'As read; empty when not measured' },
  { title: 'Container', isRequired: true, what: 'plastic, fluoropolymer, glass' },
  { title: 'Filtered in field', isRequired: false, what: 'yes, no (when empty)' },
  { title: 'Condition', isRequired: false, what: 'In a few words' },
  { title: 'Remarks', isRequired: false, what: 'In a few words' },
  {
    title: 'Determinations',
    isRequired: true,
    what: 'Codes of methods or names like “Fe total”, one after another with commas or semicolons',
  },
]

/** The heading line of a file to fill in; a title that holds the separator stands in quotation marks. */
export function templateText(): string {
  const cells = MANIFEST_COLUMNS.map(({ title }) => (title.includes(',') ? `"${title}"` : title))
  // the mark that lets spreadsheets read the degree sign
  return `\uFEFF${cells.join(',')}\r\n`
}
