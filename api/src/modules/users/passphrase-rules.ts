import { COMMON_PASSPHRASES, COMMON_WORDS } from './common-passphrases.js'

/** letters and digits that must be left when everything that is easily guessed is taken away */
const OWN_PART = 8
const ROWS = [
  'abcdefghijklmnopqrstuvwxyz',
  '0123456789',
  'qwertyuiop',
  'asdfghjkl',
  'zxcvbnm',
  'qwertzuiop',
  'azertyuiop',
  'yxcvbnm',
  '1qaz2wsx3edc4rfv5tgb6yhn7ujm',
]
/** digits and signs written for letters */
const LOOKALIKES: Record<string, string> = {
  '0': 'o',
  '1': 'i',
  '3': 'e',
  '4': 'a',
  '5': 's',
  '7': 't',
  '@': 'a',
  $: 's',
  '!': 'i',
}

/**
 * Whether a passphrase is one that guessers try first: no rules of composition, only what is common, repeated,
 * in keyboard order, or made of the words around this account.
 *
 * @param context name, e-mail address, laboratory, utility
 * @returns the reason as a sentence, or undefined when it will do
 */
export function weaknessOf(passphrase: string, context: readonly string[]): string | undefined {
  const plain = lettersAndDigits(passphrase)
  const asLetters = lettersAndDigits([...passphrase.toLowerCase()].map((c) => LOOKALIKES[c] ?? c).join(''))
  if (COMMON_PASSPHRASES.has(plain) || COMMON_PASSPHRASES.has(asLetters)) {
    return 'This passphrase is on the lists that guessers try first. Choose another.'
  }
  if (isRepeated(passphrase.toLowerCase()) || isRepeated(plain)) {
    return 'This repeats the same few characters. Choose several different words.'
  }
  const own = contextWords(context)
  const isGuessable = (text: string) =>
    text !== '' && restOf(text, [...own, ...COMMON_WORDS]).length < OWN_PART
  // a passphrase of signs or of another script has no letters here, and is not judged by them
  if (plain.length >= OWN_PART && (isGuessable(plain) || isGuessable(asLetters))) {
    return own.some((word) => asLetters.includes(word) || plain.includes(word))
      ? 'This is made of your name, your address, the laboratory or common words. Add words that have nothing to do with them.'
      : 'This is made of common words or of characters in keyboard order. Add words of your own.'
  }
  return undefined
}

function lettersAndDigits(text: string): string {
  return text
    .normalize('NFKD')
    .toLowerCase()
    .replaceAll(/[^\p{L}\p{N}]/gu, '')
}

function isRepeated(text: string): boolean {
  const characters = [...text]
  for (let period = 1; period <= Math.floor(characters.length / 2); period += 1) {
    if (characters.every((character, i) => character === characters[i % period])) return true
  }
  return false
}

function contextWords(context: readonly string[]): string[] {
  const words = context.flatMap((text) => text.split(/[^\p{L}\p{N}]+/u)).map(lettersAndDigits)
  return [...new Set(words)].filter((word) => word.length >= 3).sort((a, b) => b.length - a.length)
}

/** What is left without the words, without runs of keyboard, alphabet or counting, and without repeats of one character. */
function restOf(text: string, words: readonly string[]): string {
  let rest = text
  for (const word of words) rest = rest.replaceAll(word, ' ')
  return withoutRuns(rest.replaceAll(/(.)\1{2,}/gu, ' ')).replaceAll(' ', '')
}

function withoutRuns(text: string): string {
  let rest = ''
  for (let i = 0; i < text.length;) {
    const run = runAt(text, i)
    if (run >= 4) i += run
    else {
      rest += text[i] ?? ''
      i += 1
    }
  }
  return rest
}

function runAt(text: string, from: number): number {
  let longest = 0
  for (const row of ROWS.flatMap((forward) => [forward, [...forward].reverse().join('')])) {
    const around = row + row
    let length = 1
    while (from + length < text.length && around.includes(text.slice(from, from + length + 1))) length += 1
    longest = Math.max(longest, length)
  }
  return longest
}
