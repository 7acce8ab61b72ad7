import { describe, expect, it } from 'vitest'
import { weaknessOf } from './passphrase-rules.js'

const context = ['Nora Newman', 'nora.newman@marrowfield.example', 'Marrowfield Municipal Water Laboratory']

describe('weaknessOf', () => {
  // constructed
  it.each([
    'seven brown otters on a ferry',
    'the otters ate my very long sandwich',
    'Zug 42 nach Graz fährt ab',
    'laboratory tulips whistle at noon',
    'x9$kQ!vb2#LmZ7&p',
    '三月の雨が静かに降る夜でした',
    '!!??--##~~++==//\\\\',
    'mistral isthmus thesis',
  ])('lets %s pass', (passphrase) => {
    expect(weaknessOf(passphrase, context)).toBeUndefined()
  })

  it.each([
    ['password123456789', 'common words'],
    ['P@ssw0rd P@ssw0rd 1', 'common words'],
    ['correct horse battery staple', 'lists'],
    ['aaaaaaaaaaaaaaaaaaaa', 'repeats'],
    ['abcabcabcabcabcabc', 'repeats'],
    ['qwertyuiop1234567890', 'common words'],
    ['1q2w3e4r5t6y7u8i9o0p'.replaceAll(/(.)(.)/g, '$1$1$1'), 'common words'],
    ['marrowfieldwater2026', 'your name'],
    ['NoraNewmanNoraNewman1', 'your name'],
    ['welcome-to-Marrowfield!', 'your name'],
  ])('refuses %s', (passphrase, why) => {
    expect(weaknessOf(passphrase, context)).toContain(why)
  })
})
