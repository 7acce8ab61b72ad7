/** What a file of rows holds, all of it as the text a person sees. */
export interface SheetRow {
  /** the line (csv) or row (xlsx) as the person's own program numbers it, from 1 */
  line: number
  cells: string[]
}

export interface Sheet {
  kind: 'xlsx' | 'csv'
  /** rows with anything in them, in order */
  rows: SheetRow[]
}

export interface SheetBounds {
  maxRows: number
  maxColumns: number
  maxCellLength: number
  /** all unpacked parts of an xlsx together */
  maxUnpackedBytes: number
}

/** A reason why a file cannot be read, in the user's words. */
export class SheetRefused extends Error {
  constructor(
    message: string,
    readonly line?: number,
  ) {
    super(message)
    this.name = 'SheetRefused'
  }
}
