import { render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { LIMITS } from '@weirlight/shared/limits'
import { useState } from 'react'
import { describe, expect, it } from 'vitest'
import { DecimalInput, decimalProblem } from './decimal-input'

function Harness() {
  const [text, setText] = useState('')
  return <DecimalInput aria-label="Absorbance" value={text} onChange={setText} />
}
const field = () => screen.getByRole<HTMLInputElement>('textbox', { name: 'Absorbance' })

describe('DecimalInput', () => {
  it('keeps trailing zeros as they were typed', async () => {
    render(<Harness />)
    await userEvent.type(field(), '0.1200')
    expect(field().value).toBe('0.1200')
    expect(screen.queryByRole('alert')).toBeNull()
  })
  it('names a decimal comma and changes nothing', async () => {
    render(<Harness />)
    await userEvent.type(field(), '0,12')
    expect(screen.getByRole('alert').textContent).toBe('Use a decimal point: 0.12')
    expect(field().value).toBe('0,12')
  })
})

describe('decimalProblem', () => {
  const range = { ...LIMITS.absorbance, what: 'absorbance' }
  // sentences and limits are the contract's own
  it.each([
    ['0.3964', null],
    ['-0.0007', null],
    ['', 'Enter the absorbance.'],
    ['0,12', 'Use a decimal point: 0.12.'],
    ['o.12', '“o.12” is not a number.'],
    ['71', 'The absorbance must lie between -0.5 and 4.'],
  ])('“%s”', (text, sentence) => expect(decimalProblem(text, range)).toBe(sentence))
})
