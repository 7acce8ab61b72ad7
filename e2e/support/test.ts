import {
  expect,
  request,
  test as base,
  type APIRequestContext,
  type BrowserContext,
  type Page,
} from '@playwright/test'
import { product, type Account } from './accounts.js'
import { Api } from './api.js'

type StoredState = Awaited<ReturnType<APIRequestContext['storageState']>>

/** Signs in beside the page; the cookie is all a page needs. */
async function openSession(account: Account): Promise<StoredState> {
  const context = await request.newContext({ baseURL: product().url })
  const response = await context.post('/api/session', {
    headers: { 'x-weirlight': '1' },
    data: { email: account.email, password: account.passphrase },
  })
  if (!response.ok()) throw new Error(`${account.email} cannot sign in: ${await response.text()}`)
  const state = await context.storageState()
  await context.dispose()
  return state
}

interface ForWorker {
  /** one session for each account and worker */
  sessionOf: (account: Account) => Promise<StoredState>
}

interface ForTest {
  /** a page of its own, signed in; `isFresh` takes a session that nobody else uses */
  as: (account: Account, options?: { isFresh?: boolean }) => Promise<Page>
  /** a page with nobody signed in */
  anyone: () => Promise<Page>
  apiOf: (account: Account) => Promise<Api>
}

export const test = base.extend<ForTest & { watched: (context: BrowserContext) => Promise<Page> }, ForWorker>(
  {
    sessionOf: [
      async ({}, use) => {
        const kept = new Map<string, Promise<StoredState>>()
        await use((account) => {
          const known = kept.get(account.email) ?? openSession(account)
          kept.set(account.email, known)
          return known
        })
      },
      { scope: 'worker' },
    ],

    /** A page whose faults fail the test: an error nobody caught, a script or style the policy refused. */
    watched: async ({}, use) => {
      const faults: string[] = []
      await use(async (context) => {
        const page = await context.newPage()
        page.on('pageerror', (error) => faults.push(`${page.url()}: ${error.stack ?? error.message}`))
        page.on('console', (message) => {
          const text = message.text()
          // the browser notes every answer of 400 and above by itself
          const isAnswer = text.startsWith('Failed to load resource')
          if (message.type() === 'error' && !isAnswer) faults.push(`${page.url()}: ${text}`)
        })
        return page
      })
      expect(faults, 'errors in the page').toEqual([])
    },

    as: async ({ browser, sessionOf, watched }, use) => {
      const contexts: BrowserContext[] = []
      await use(async (account, { isFresh = false } = {}) => {
        const storageState = isFresh ? await openSession(account) : await sessionOf(account)
        const context = await browser.newContext({ storageState })
        contexts.push(context)
        return watched(context)
      })
      await Promise.all(contexts.map((context) => context.close()))
    },

    anyone: async ({ browser, watched }, use) => {
      const contexts: BrowserContext[] = []
      await use(async () => {
        const context = await browser.newContext()
        contexts.push(context)
        return watched(context)
      })
      await Promise.all(contexts.map((context) => context.close()))
    },

    apiOf: async ({ sessionOf }, use) => {
      const contexts: APIRequestContext[] = []
      await use(async (account) => {
        const context = await request.newContext({
          baseURL: product().url,
          storageState: await sessionOf(account),
        })
        contexts.push(context)
        return new Api(context)
      })
      await Promise.all(contexts.map((context) => context.dispose()))
    },
  },
)

export { expect }
