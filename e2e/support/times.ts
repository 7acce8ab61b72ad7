/** A moment as the page wants it typed, by the laboratory's clock: `2026-12-01 14:05`. */
export function laboratoryTime(at: Date, timeZone: string): string {
  const parts = new Intl.DateTimeFormat('en-CA', {
    timeZone,
    dateStyle: 'short',
    timeStyle: 'short',
    hourCycle: 'h23',
  }).formatToParts(at)
  const part = (type: string) => parts.find((each) => each.type === type)?.value ?? ''
  return `${part('year')}-${part('month')}-${part('day')} ${part('hour')}:${part('minute')}`
}

export const minutesAgo = (minutes: number) => new Date(Date.now() - minutes * 60_000)
export const hoursAgo = (hours: number) => minutesAgo(hours * 60)
