import { QueryClient, QueryClientProvider, useQuery } from '@tanstack/react-query'
import { render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { MemoryRouter } from 'react-router-dom'
import { describe, expect, it, vi } from 'vitest'
import { ProblemError } from '../lib/problem-error'
import { Loaded } from './page-states'

const problem = (code: ProblemError['code'], path?: string) =>
  new ProblemError({
    code,
    status: 0,
    title: '',
    detail: 'A sentence of the server.',
    errors: path ? [{ path, message: 'This is not a valid reference.' }] : [],
  })

function Page({ ask }: { ask: () => Promise<string> }) {
  const query = useQuery({ queryKey: ['sample'], queryFn: ask, retry: false })
  return (
    <Loaded query={query} skeleton="page" what="sample" back={{ to: '/receiving', label: 'Receiving' }}>
      {(text) => <h1>{text}</h1>}
    </Loaded>
  )
}

function show(ask: () => Promise<string>) {
  render(
    <QueryClientProvider client={new QueryClient()}>
      <MemoryRouter>
        <Page ask={ask} />
      </MemoryRouter>
    </QueryClientProvider>,
  )
}

const heading = async () => (await screen.findByRole('heading', { level: 1 })).textContent
const wayOut = () => screen.getByRole('link', { name: '← Receiving' }).getAttribute('href')

describe('a page of one thing', () => {
  it('has a way out while it loads', () => {
    show(() => new Promise(() => undefined))
    expect(screen.getAllByRole('status', { name: 'Loading' })).not.toHaveLength(0)
    expect(wayOut()).toBe('/receiving')
  })
  it.each([
    ['is not there', problem('not-found')],
    ['has an address that cannot be one', problem('invalid-input', 'id')],
  ])('says what is missing when it %s, and where all of them are', async (_, error) => {
    show(() => Promise.reject(error))
    expect(await heading()).toBe('No such sample')
    expect(screen.getByRole('link', { name: 'Go to Receiving' }).getAttribute('href')).toBe('/receiving')
  })
  it('says that it is not open to the role', async () => {
    show(() => Promise.reject(problem('forbidden')))
    expect(await heading()).toBe('Not open to your role')
    expect(wayOut()).toBe('/receiving')
  })
  it('says that it failed, and tries again', async () => {
    const ask = vi.fn<() => Promise<string>>().mockRejectedValueOnce(problem('unavailable'))
    ask.mockResolvedValueOnce('Sample S-26-00001')
    show(ask)
    expect(await heading()).toBe('The sample could not be loaded')
    await userEvent.click(screen.getByRole('button', { name: 'Try again' }))
    expect(await screen.findByRole('heading', { name: 'Sample S-26-00001' })).toBeTruthy()
  })
})
