import { createServer } from 'node:net'

const host = '127.0.0.1'

const listen = (port) =>
  new Promise((resolve) => {
    const server = createServer()
    server.once('error', () => resolve(undefined))
    server.listen({ port, host, exclusive: true }, () => {
      const taken = server.address().port
      server.close(() => resolve(taken))
    })
  })

export const isPortFree = async (port) => (await listen(port)) !== undefined

/** The first free port of those wished for, else any free one. */
export const freePort = async (...wished) => {
  for (const port of wished) {
    if (port && (await isPortFree(port))) return port
  }
  const port = await listen(0)
  if (port === undefined) throw new Error('No free port on 127.0.0.1')
  return port
}
