import type { Endpoint, ParamsInput, QueryInput, BodyInput, ResponseOf } from '@weirlight/shared/contracts'
import type { AxiosProgressEvent, AxiosRequestConfig } from 'axios'
import { http } from './http'
import { ProblemError } from './problem-error'
import { waitForSignIn } from './re-sign-in'

type Part<Name extends string, Value> = [Value] extends [undefined] ? unknown : { [K in Name]: Value }
type QueryPart<Value> = [Value] extends [undefined]
  ? unknown
  : Record<string, never> extends Value
    ? { query?: Value }
    : { query: Value }

/** What an endpoint needs: `params`, `query`, `body` as its contract has them, and `file` where it takes one. */
export type CallInput<E extends Endpoint> = Part<'params', ParamsInput<E>> &
  QueryPart<QueryInput<E>> &
  Part<'body', BodyInput<E>> &
  (E extends { upload: true } ? { file: File } : unknown)

/** The input may be left out where the endpoint needs none. */
export type CallArguments<E extends Endpoint> =
  Record<string, never> extends CallInput<E> ? [input?: CallInput<E>] : [input: CallInput<E>]

interface LooseInput {
  params?: Record<string, unknown>
  query?: Record<string, unknown>
  body?: unknown
  file?: File
}

export interface CallOptions {
  signal?: AbortSignal
  onProgress?: (share: number) => void
  /** false: a session that ran out is reported, not mended in place */
  canAskToSignIn?: boolean
}

function fillPath(path: string, params: Record<string, unknown> = {}): string {
  return path.replace(/:([A-Za-z]+)/g, (_, name: string) => encodeURIComponent(String(params[name] ?? '')))
}

/** Empty filters are left out rather than sent as empty text. */
function presentOnly(query: Record<string, unknown> = {}): Record<string, unknown> {
  return Object.fromEntries(
    Object.entries(query).filter(([, value]) => value !== undefined && value !== null && value !== ''),
  )
}

function requestOf(endpoint: Endpoint, input: LooseInput, options: CallOptions): AxiosRequestConfig {
  const config: AxiosRequestConfig = {
    method: endpoint.method,
    url: fillPath(endpoint.path, input.params),
    params: presentOnly(input.query),
  }
  if (options.signal) config.signal = options.signal
  if (input.file) {
    const form = new FormData()
    form.append('file', input.file)
    config.data = form
    config.onUploadProgress = (event: AxiosProgressEvent) => options.onProgress?.(event.progress ?? 0)
  } else if (input.body !== undefined) {
    config.data = input.body
  }
  if (endpoint.file) config.responseType = 'blob'
  return config
}

async function send(endpoint: Endpoint, input: LooseInput, options: CallOptions): Promise<unknown> {
  const request = requestOf(endpoint, input, options)
  try {
    return (await http.request<unknown>(request)).data
  } catch (error) {
    const isSessionOver = error instanceof ProblemError && error.code === 'signed-out'
    if (!isSessionOver || endpoint.permission === 'public' || options.canAskToSignIn === false) throw error
    await waitForSignIn()
    return (await http.request<unknown>(request)).data
  }
}

/** Calls an endpoint of `@weirlight/shared/contracts`; throws `ProblemError` and nothing else. */
export function call<E extends Endpoint>(
  endpoint: E,
  input: CallInput<E>,
  options: CallOptions = {},
): Promise<ResponseOf<E>> {
  // the server has validated the answer against the same contract
  return send(endpoint, input as LooseInput, options) as Promise<ResponseOf<E>>
}

/** The address of a GET endpoint, for a link to a file: `<a href={hrefFor(runSheetFile, { params: { id } })}>`. */
export function hrefFor<E extends Endpoint>(endpoint: E, input: CallInput<E>): string {
  const { params, query } = input as LooseInput
  const search = new URLSearchParams(
    Object.entries(presentOnly(query)).map(([name, value]) => [name, String(value)]),
  ).toString()
  return `/api${fillPath(endpoint.path, params)}${search ? `?${search}` : ''}`
}
