/** Lengths and ranges used by contracts, forms and SQL checks alike. */
export const LIMITS = {
  nameLength: 120,
  noteLength: 2000,
  reasonLength: 500,
  reasonMinimum: 3,
  emailLength: 254,
  passphraseMinimum: 15,
  passphraseMaximum: 200,
  codeLength: 40,
  /** absorbance outside this is a slip of the hand, not a reading */
  absorbance: { low: -0.5, high: 4 },
  concentration: { low: 0, high: 100_000 },
  dilution: { low: 1, high: 10_000 },
  temperature: { low: -20, high: 60 },
  replicates: 5,
  standards: 20,
  batchPositions: 80,
  uploadBytes: 2 * 1024 * 1024,
  uploadRows: 2000,
  pageSize: 50,
  pageSizeMaximum: 200,
} as const
