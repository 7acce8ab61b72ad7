const GROUP = 4

/** However it was typed, as it is printed: capitals in groups of four. */
export function writtenCode(typed: string): string {
  const letters = typed.toUpperCase().replace(/[^A-Z0-9]/g, '')
  const groups = letters.match(new RegExp(`.{1,${GROUP}}`, 'g')) ?? []
  return groups.join('-')
}

/** The sentence on the field; null where the code can be asked for. */
export function codeProblem(typed: string): string | null {
  const letters = typed.replace(/[^A-Za-z0-9]/g, '').length
  if (letters === 0) return 'Type the code that stands at the foot of the certificate.'
  if (letters < 12) return `A code has sixteen letters and digits; this one has ${letters}.`
  if (letters > 16) return `A code has sixteen letters and digits; this one has ${letters}.`
  return null
}

/** `9f2c…` as it is compared and read aloud: in groups of eight. */
export const groupedHash = (sha256: string): string => sha256.match(/.{1,8}/g)?.join(' ') ?? sha256

/** SHA-256 of a file, computed in the browser; null where the browser only does that over https. */
export async function sha256Of(file: Blob): Promise<string | null> {
  // missing on plain http, whatever the types say
  const subtle = crypto.subtle as SubtleCrypto | undefined
  if (!subtle) return null
  const digest = await subtle.digest('SHA-256', await file.arrayBuffer())
  return [...new Uint8Array(digest)].map((byte) => byte.toString(16).padStart(2, '0')).join('')
}
