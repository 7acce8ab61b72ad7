import type { APIRequestContext } from '@playwright/test'
import type { BodyInput, Endpoint, ParamsInput, QueryInput, ResponseOf } from '@weirlight/shared/contracts'

type Part<Name extends string, Value> = [Value] extends [undefined] ? unknown : { [K in Name]: Value }
type QueryPart<Value> = [Value] extends [undefined] ? unknown : { query?: Partial<Value> }
type Input<E extends Endpoint> = Part<'params', ParamsInput<E>> &
  QueryPart<QueryInput<E>> &
  Part<'body', BodyInput<E>>

interface LooseInput {
  params?: Record<string, unknown>
  query?: Record<string, unknown>
  body?: unknown
}

/** What the server answers beside the page: used where the page is not the point, and to compare with it. */
export class Api {
  constructor(private readonly request: APIRequestContext) {}

  async call<E extends Endpoint>(endpoint: E, input: Input<E>): Promise<ResponseOf<E>> {
    const { status, text } = await this.send(endpoint, input)
    if (status >= 300) throw new Error(`${endpoint.name} answered ${status}: ${text}`)
    return JSON.parse(text === '' ? 'null' : text) as ResponseOf<E>
  }

  /** For what should be refused. */
  async send<E extends Endpoint>(endpoint: E, input: Input<E>): Promise<{ status: number; text: string }> {
    const { params = {}, query = {}, body } = input as LooseInput
    const path = endpoint.path.replace(/:(\w+)/g, (_, name: string) =>
      encodeURIComponent(String(params[name])),
    )
    const search = new URLSearchParams(
      Object.entries(query).map(([name, value]): [string, string] => [name, String(value)]),
    ).toString()
    const response = await this.request.fetch(`/api${path}${search ? `?${search}` : ''}`, {
      method: endpoint.method,
      headers: { 'x-weirlight': '1' },
      ...(body === undefined ? {} : { data: body }),
    })
    return { status: response.status(), text: await response.text() }
  }

  async file(path: string): Promise<Buffer> {
    const response = await this.request.get(path)
    if (!response.ok()) throw new Error(`${path} answered ${response.status()}`)
    return response.body()
  }
}
