import { render, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { describe, expect, it, vi } from 'vitest'
import { ProblemError } from '../lib/problem-error'
import { ReasonDialog, SignDialog } from './dialogs'

const wrong = () =>
  new ProblemError({
    code: 'wrong-passphrase',
    status: 403,
    title: '',
    detail: 'This is not your passphrase.',
  })

describe('SignDialog', () => {
  const show = (onSign: (passphrase: string) => Promise<unknown>) => {
    const onClose = vi.fn()
    render(
      <SignDialog
        isOpen
        onClose={onClose}
        title="Sign K-26-0087 for use"
        meaning="accepted for use"
        consequences={['It carries results until 2026-12-14.']}
        actionLabel="Sign for use"
        onSign={onSign}
      />,
    )
    return onClose
  }

  it('says what it means and what follows before it asks', () => {
    show(async () => undefined)
    expect(screen.getByText('accepted for use')).toBeTruthy()
    expect(screen.getByText('It carries results until 2026-12-14.')).toBeTruthy()
  })

  it('puts a wrong passphrase on its field and stays open; signs and closes with the right one', async () => {
    const user = userEvent.setup()
    const onSign = vi.fn(async (passphrase: string) => {
      if (passphrase !== 'right horse battery') throw wrong()
    })
    const onClose = show(onSign)
    await user.type(screen.getByLabelText('Your passphrase'), 'nope')
    await user.click(screen.getByRole('button', { name: 'Sign for use' }))
    expect(await screen.findByText('This is not your passphrase.')).toBeTruthy()
    expect(onClose).not.toHaveBeenCalled()
    await user.clear(screen.getByLabelText('Your passphrase'))
    await user.type(screen.getByLabelText('Your passphrase'), 'right horse battery{Enter}')
    await waitFor(() => expect(onClose).toHaveBeenCalledOnce())
    expect(onSign).toHaveBeenLastCalledWith('right horse battery', '')
  })
})

describe('ReasonDialog', () => {
  it('does nothing without a reason', async () => {
    const user = userEvent.setup()
    const onConfirm = vi.fn()
    render(
      <ReasonDialog
        isOpen
        onClose={() => undefined}
        title="Send back"
        actionLabel="Send back"
        onConfirm={onConfirm}
      />,
    )
    await user.click(screen.getByRole('button', { name: 'Send back' }))
    expect(await screen.findByText(/Give the reason in a few words/)).toBeTruthy()
    expect(onConfirm).not.toHaveBeenCalled()
    await user.type(screen.getByLabelText('Reason'), 'Blank too high')
    await user.click(screen.getByRole('button', { name: 'Send back' }))
    await waitFor(() => expect(onConfirm).toHaveBeenCalledExactlyOnceWith('Blank too high'))
  })
})
