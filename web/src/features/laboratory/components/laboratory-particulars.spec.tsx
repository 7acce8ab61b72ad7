import { QueryClientProvider } from '@tanstack/react-query'
import { render, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { createMemoryRouter, RouterProvider } from 'react-router-dom'
import { expect, it, vi } from 'vitest'
import { call } from '../../../lib/call'
import { ProblemError } from '../../../lib/problem-error'
import { makeQueryClient } from '../../../lib/query-client'
import { SessionContext } from '../../../lib/session'
import { LaboratoryParticulars } from './laboratory-particulars'

vi.mock('../../../lib/call', () => ({ call: vi.fn() }))

// constructed
const session = {
  userId: '1',
  name: 'Ada Fell',
  email: 'ada@laboratory.example',
  role: 'administrator' as const,
  clientId: null,
  clientName: null,
  timeZone: 'America/New_York',
  laboratoryName: 'Town Water Laboratory',
  signedInAt: '2026-12-01T12:00:00Z',
  endsAt: '2026-12-02T00:00:00Z',
  idleMinutes: 30,
}
const laboratory = {
  name: 'Town Water Laboratory',
  address: '1 Weir Lane',
  accreditation: 'X-1',
  email: 'desk@laboratory.example',
  phone: '555-0100',
  timeZone: 'America/New_York',
  version: 1,
}

it('loads again in place when somebody else was first: what was typed stays, the rest shows theirs', async () => {
  let stored = laboratory
  const sent: unknown[] = []
  vi.mocked(call).mockImplementation((async (endpoint: { name: string }, input: { body?: unknown }) => {
    if (endpoint.name === 'getLaboratory') return stored
    sent.push(input.body)
    if ((input.body as typeof laboratory).version === stored.version) return stored
    throw new ProblemError({
      code: 'stale',
      status: 409,
      title: '',
      detail: 'Ewa Kestrel changed this after you opened it.',
      conflict: { changedBy: 'Ewa Kestrel', changedAt: '2026-12-01T14:05:00Z' },
    })
  }) as unknown as typeof call)
  const user = userEvent.setup()
  render(
    <QueryClientProvider client={makeQueryClient()}>
      <SessionContext value={session}>
        <RouterProvider router={createMemoryRouter([{ path: '/', element: <LaboratoryParticulars /> }])} />
      </SessionContext>
    </QueryClientProvider>,
  )
  const name = await screen.findByLabelText('Name')
  await user.clear(name)
  await user.type(name, 'City Water Laboratory')
  stored = { ...laboratory, phone: '555-0199', version: 2 }
  await user.click(screen.getByRole('button', { name: 'Change it' }))
  expect(
    await screen.findByText(/Ewa Kestrel changed this after you opened it, 2026-12-01 09:05/),
  ).toBeTruthy()

  await user.click(screen.getByRole('button', { name: 'Load it again' }))
  await waitFor(() => expect(screen.getByLabelText<HTMLInputElement>('Telephone').value).toBe('555-0199'))
  expect(screen.getByLabelText<HTMLInputElement>('Name').value).toBe('City Water Laboratory')
  expect(await screen.findByText(/Loaded again. What you entered is still here/)).toBeTruthy()
  expect(screen.queryByText(/Ewa Kestrel changed this/)).toBeNull()

  await user.click(screen.getByRole('button', { name: 'Change it' }))
  await waitFor(() => expect(sent).toHaveLength(2))
  expect(sent[1]).toMatchObject({ name: 'City Water Laboratory', phone: '555-0199', version: 2 })
})
