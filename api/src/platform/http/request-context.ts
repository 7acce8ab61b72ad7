import { AsyncLocalStorage } from 'node:async_hooks'

export interface RequestContext {
  readonly requestId: string
}

const storage = new AsyncLocalStorage<RequestContext>()

/** The id of the request (or job) that is being served, for history and for logs. */
export function currentRequestId(): string | undefined {
  return storage.getStore()?.requestId
}

export function withRequestContext<T>(context: RequestContext, fn: () => T): T {
  return storage.run(context, fn)
}
