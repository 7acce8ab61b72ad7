export interface LinkMail {
  name: string
  /** the administrator who started it; null when the person did */
  startedBy: string | null
  link: string
  expiresAt: Date
  timeZone: string
  laboratoryName: string
}

/** `2026-12-01 14:05 (Europe/Berlin)` */
export function timeInWords(at: Date, timeZone: string): string {
  // the Swedish way of writing a date is ISO's
  const text = new Intl.DateTimeFormat('sv-SE', { timeZone, dateStyle: 'short', timeStyle: 'short' }).format(
    at,
  )
  return `${text} (${timeZone})`
}
