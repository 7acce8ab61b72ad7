import { z } from 'zod'
import { LIMITS } from '../limits.js'

/** bigint identity, as text on the wire */
export const id = z.string().regex(/^[1-9]\d{0,18}$/, 'This is not a valid reference.')
export const idParams = z.object({ id })
export const version = z.number().int().min(1)
export const instant = z.iso.datetime({ offset: true, error: 'Write date and time as 2026-12-01 14:05.' })
export const day = z.iso.date('Write the date as year-month-day, for example 2026-12-01.')
export const name = z
  .string()
  .trim()
  .min(1, 'Please fill this in.')
  .max(LIMITS.nameLength, `At most ${LIMITS.nameLength} characters.`)
export const note = z.string().trim().max(LIMITS.noteLength, `At most ${LIMITS.noteLength} characters.`)
export const reason = z
  .string()
  .trim()
  .min(LIMITS.reasonMinimum, 'Give the reason in a few words; it is kept in the history.')
  .max(LIMITS.reasonLength, `At most ${LIMITS.reasonLength} characters.`)
export const email = z
  .string()
  .trim()
  .toLowerCase()
  .max(LIMITS.emailLength)
  .pipe(z.email('This is not a complete e-mail address.'))
export const passphrase = z
  .string()
  .min(1, 'Enter your passphrase.')
  .max(LIMITS.passphraseMaximum, `At most ${LIMITS.passphraseMaximum} characters.`)
export const newPassphrase = z
  .string()
  .min(
    LIMITS.passphraseMinimum,
    `At least ${LIMITS.passphraseMinimum} characters; several words in a row are easy to remember.`,
  )
  .max(LIMITS.passphraseMaximum, `At most ${LIMITS.passphraseMaximum} characters.`)

/** spaces and hyphens may stand between */
const bareCode = z
  .string()
  .max(LIMITS.codeLength, `At most ${LIMITS.codeLength} characters.`)
  .transform((text) => text.replaceAll(/[\s-]+/g, '').toUpperCase())
/** six digits of a device */
export const deviceCode = bareCode.pipe(
  z.string().regex(/^\d{6}$/, 'Enter the six digits that your device shows.'),
)
/** six digits of a device, or a recovery code */
export const signInCode = bareCode.pipe(
  z
    .string()
    .regex(
      /^(\d{6}|[A-Z2-7]{16})$/,
      'Enter the six digits that your device shows, or one of your recovery codes: four groups of four.',
    ),
)

/** a number typed by a person, kept as typed; a decimal comma is named, not guessed */
export function decimalText(range: { low: number; high: number; what: string; unit?: string }) {
  const unit = range.unit ? ` ${range.unit}` : ''
  return z
    .string()
    .trim()
    .superRefine((text, context) => {
      const say = (message: string) => context.addIssue({ code: 'custom', message })
      if (text === '') return say(`Enter the ${range.what}.`)
      if (/^[-+]?\d+,\d+$/.test(text)) return say(`Use a decimal point: ${text.replace(',', '.')}.`)
      if (!/^[-+]?(\d+\.?\d*|\.\d+)([eE][-+]?\d{1,3})?$/.test(text))
        return say(`“${text.slice(0, 20)}” is not a number.`)
      if (text.length > 24) return say('This number has too many digits.')
      const value = Number(text)
      if (value < range.low || value > range.high) {
        return say(`The ${range.what} must lie between ${range.low} and ${range.high}${unit}.`)
      }
    })
}
export const absorbanceText = decimalText({ ...LIMITS.absorbance, what: 'absorbance' })
export const concentrationText = decimalText({ ...LIMITS.concentration, what: 'concentration', unit: 'mg/L' })
export const dilutionText = decimalText({ ...LIMITS.dilution, what: 'dilution factor' })

/** Lists page by key: `after` is the cursor the last page gave. */
export const pageQuery = z.object({
  after: z.string().max(200).optional(),
  limit: z.coerce.number().int().min(1).max(LIMITS.pageSizeMaximum).default(LIMITS.pageSize),
})
export function pageOf<T extends z.ZodType>(item: T) {
  return z.object({ items: z.array(item), next: z.string().nullable() })
}

export const person = z.object({ id, name: z.string() })
export const analyteCode = z.enum(['Fe', 'Cu', 'Mn', 'Cr'])
export type AnalyteCode = z.infer<typeof analyteCode>
/** as people write them */
export const ANALYTE_NAMES: Record<AnalyteCode, string> = {
  Fe: 'Iron',
  Cu: 'Copper',
  Mn: 'Manganese',
  Cr: 'Chromium',
}
export const FORM_NAMES = { total: 'total', dissolved: 'dissolved', hexavalent: '(VI)' } as const
/** `Iron, total`, `Chromium(VI)` */
export function determinationName(analyte: AnalyteCode, of: keyof typeof FORM_NAMES): string {
  return of === 'hexavalent'
    ? `${ANALYTE_NAMES[analyte]}(VI)`
    : `${ANALYTE_NAMES[analyte]}, ${FORM_NAMES[of]}`
}
/** the micro sign is shown, never stored */
export const showUnit = (stored: string): string => stored.replace('ug/', 'µg/')
export const form = z.enum(['total', 'dissolved', 'hexavalent'])
export const unit = z.enum(['mg/L', 'ug/L'])
export const verdict = z.enum(['below', 'above', 'conditional-below', 'conditional-above'])

/** Every binding act asks for the passphrase again and says which version was on the screen. */
export const signing = z.object({ passphrase, version })
export const versioned = z.object({ version })
export const versionedReason = z.object({ version, reason })
export const signature = z.object({
  id,
  meaning: z.enum(['prepared', 'reviewed', 'accepted for use', 'released', 'amended']),
  printedName: z.string(),
  role: z.string(),
  at: instant,
  contentSha256: z.string(),
  /** false once what was signed has changed */
  stands: z.boolean(),
})
