/** What the bench uses of autocannon, which brings no types of its own. */
declare module 'autocannon' {
  import type { EventEmitter } from 'node:events'

  export interface LoadRequest {
    method?: 'GET' | 'POST' | 'PUT' | 'DELETE'
    path?: string
    headers?: Record<string, string>
    body?: string
    /** called before each request is sent */
    setupRequest?: (request: LoadRequest) => LoadRequest
    onResponse?: (status: number, body: string) => void
  }
  export interface LoadClient extends EventEmitter {
    setRequests(requests: LoadRequest[]): void
  }
  export interface LoadInstance extends EventEmitter {
    stop(): void
  }
  export interface LoadOptions {
    url: string
    connections: number
    amount: number
    /** seconds */
    timeout?: number
    setupClient?: (client: LoadClient) => void
  }
  export default function autocannon(
    options: LoadOptions,
    done: (error: Error | null, result: { errors: number; timeouts: number; duration: number }) => void,
  ): LoadInstance
}
