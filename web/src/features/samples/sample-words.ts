import type { SampleRow, SampleView } from './api/sample-queries'

export const PURPOSE_WORDS: Record<SampleRow['purpose'], string> = {
  compliance: 'Compliance',
  operational: 'Operational',
}
export const KIND_WORDS: Record<SampleRow['kind'], string> = {
  routine: 'Routine',
  confirmation: 'Confirmation',
  raw: 'Raw water',
  process: 'Process',
  special: 'Special',
}
export const PRESERVATION_WORDS: Record<SampleView['preservation'], string> = {
  none: 'None',
  'nitric-acid': 'Nitric acid',
  'ammonium-sulfate-buffer': 'Ammonium sulfate buffer',
}
export const CONTAINER_WORDS: Record<SampleView['container'], string> = {
  plastic: 'Plastic',
  fluoropolymer: 'Fluoropolymer',
  glass: 'Glass',
}

const optionsOf = <T extends string>(words: Record<T, string>) =>
  Object.entries<string>(words).map(([value, label]) => ({ value, label }))

export const PURPOSES = optionsOf(PURPOSE_WORDS)
export const KINDS = optionsOf(KIND_WORDS)
export const PRESERVATIONS = optionsOf(PRESERVATION_WORDS)
export const CONTAINERS = optionsOf(CONTAINER_WORDS)

export const SUGGESTED_WORDS: Record<SampleView['suggested'], string> = {
  accepted: 'Every check is met: it can be accepted.',
  'accepted-with-qualification': 'A check is not met: accept it with a qualification, or reject it.',
  rejected: 'A compliance sample that fails a check is rejected, unless the client asks in writing to go on.',
}

/** Whether a sample still waits for the decision. */
export const isUndecided = (sample: Pick<SampleRow, 'state'>): boolean =>
  sample.state === 'received' || sample.state === 'expected'

/** A check may name a rule by its code: `Preservation: metals-in-acid`. */
export const checkWords = (check: string): string =>
  check.replace(/^(Preservation: )(.+)$/, (_, what: string, code: string) => what + code.replaceAll('-', ' '))
