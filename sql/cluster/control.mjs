// Lets a browser test pull the plug: ends and restarts the application or the mail server as a power cut would.
// Listens on loopback, for the length of a test run, and only to whoever knows the token in its address.

import { randomBytes } from 'node:crypto'
import { createServer } from 'node:http'

export const startControl = async ({ api, mail }) => {
  const token = randomBytes(16).toString('hex')
  const moves = {
    'POST /api/kill': api.kill,
    'POST /api/start': api.start,
    'POST /mail/kill': mail.kill,
    'POST /mail/start': mail.start,
  }
  const server = createServer(async (request, response) => {
    const path = request.url.startsWith(`/${token}/`) ? request.url.slice(token.length + 1) : undefined
    const move = moves[`${request.method} ${path}`]
    if (!move) return response.writeHead(404).end()
    try {
      await move()
      return response.writeHead(204).end()
    } catch (error) {
      return response.writeHead(500, { 'content-type': 'text/plain' }).end(String(error))
    }
  })
  await new Promise((resolve) => server.listen(0, '127.0.0.1', resolve))
  return {
    url: `http://127.0.0.1:${server.address().port}/${token}`,
    stop: async () => {
      server.closeAllConnections()
      await new Promise((resolve) => server.close(resolve))
    },
  }
}
