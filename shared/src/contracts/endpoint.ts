import type { z } from 'zod'
import type { Action } from '../permissions/index.js'

export type HttpMethod = 'GET' | 'POST' | 'PUT' | 'DELETE'

/** `public`: no session needed; `signed-in`: any active account; otherwise an action of the permissions table. */
export type Permission = 'public' | 'signed-in' | Action

/** What the body is: JSON by contract, one uploaded file, or nothing. What comes back: JSON or a file. */
export interface Endpoint<
  P extends z.ZodType = z.ZodType,
  Q extends z.ZodType = z.ZodType,
  B extends z.ZodType = z.ZodType,
  R extends z.ZodType = z.ZodType,
> {
  readonly name: string
  readonly summary: string
  readonly method: HttpMethod
  /** below `/api`, parameters as `:id` */
  readonly path: string
  readonly permission: Permission
  readonly params?: P
  readonly query?: Q
  readonly body?: B
  readonly upload?: boolean
  readonly response?: R
  /** media types of a file answer, instead of `response` */
  readonly file?: readonly string[]
}

export type ParamsOf<E> = E extends { params: infer P extends z.ZodType } ? z.output<P> : undefined
export type QueryOf<E> = E extends { query: infer Q extends z.ZodType } ? z.output<Q> : undefined
export type BodyOf<E> = E extends { body: infer B extends z.ZodType } ? z.output<B> : undefined
export type ResponseOf<E> = E extends { response: infer R extends z.ZodType } ? z.output<R> : undefined
export type ParamsInput<E> = E extends { params: infer P extends z.ZodType } ? z.input<P> : undefined
export type QueryInput<E> = E extends { query: infer Q extends z.ZodType } ? z.input<Q> : undefined
export type BodyInput<E> = E extends { body: infer B extends z.ZodType } ? z.input<B> : undefined

/** The one statement of an endpoint: the server validates with it, the client is typed by it. */
export function defineEndpoint<const E extends Endpoint>(endpoint: E): E {
  return endpoint
}
