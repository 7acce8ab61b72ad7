import { product } from './accounts.js'

/** Pulls a plug as a power cut would, and puts it back: only the launcher of the tests can do that. */
async function move(path: string): Promise<void> {
  const base = process.env['E2E_CONTROL_URL']
  if (!base) throw new Error('E2E_CONTROL_URL is not set: start these tests by `npm test`.')
  const response = await fetch(`${base}${path}`, { method: 'POST' })
  if (!response.ok) throw new Error(`${path} answered ${response.status}: ${await response.text()}`)
}

export const control = {
  killMail: () => move('/mail/kill'),
  startMail: () => move('/mail/start'),
  killApplication: () => move('/api/kill'),
  startApplication: () => move('/api/start'),
  isApplicationUp: () =>
    fetch(`${product().url}/api/health`).then(
      (response) => response.ok,
      () => false,
    ),
}
