import axios, { AxiosError, type AxiosResponse } from 'axios'
import { offlineProblem, parseProblem } from './problem-error'
import { noteServerTime } from './server-clock'

/** The one HTTP client. Every changing request carries `x-weirlight`, which no other site can send for a person. */
export const http = axios.create({
  baseURL: '/api',
  headers: { 'x-weirlight': '1' },
  timeout: 60_000,
})

type Listener = (isOnline: boolean) => void
const listeners = new Set<Listener>()

/** Told after every call whether the server answered at all. */
export function onReachable(listener: Listener): () => void {
  listeners.add(listener)
  return () => void listeners.delete(listener)
}

function tell(isOnline: boolean) {
  for (const listener of listeners) listener(isOnline)
}

async function readBody(response: AxiosResponse): Promise<unknown> {
  const body: unknown = response.data
  if (!(body instanceof Blob)) return body
  try {
    return JSON.parse(await body.text())
  } catch {
    return null
  }
}

http.interceptors.response.use(
  (response) => {
    noteServerTime(response.headers['date'])
    tell(true)
    return response
  },
  async (error: unknown) => {
    if (axios.isCancel(error)) throw error
    if (!(error instanceof AxiosError)) throw error
    if (!error.response) {
      tell(false)
      throw offlineProblem()
    }
    noteServerTime(error.response.headers['date'])
    const problem = parseProblem({
      status: error.response.status,
      body: await readBody(error.response),
    })
    tell(problem.code !== 'offline')
    throw problem
  },
)
