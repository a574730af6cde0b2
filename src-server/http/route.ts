import type { Request, Response } from 'express'
import type { Logger } from 'pino'
import type { z } from 'zod'
import type { Role } from '#shared/contracts/names'
import type { SignedIn } from '../people'

export type Method = 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'
export type RouteRole = 'none' | Role

/** Status of each answer with its schema; null where there is no body. The first is what a plain return value means. */
export type Answers = Readonly<Record<number, z.ZodType | null>>
type BodyOf<A extends Answers> = { [S in keyof A]: A[S] extends z.ZodType ? z.input<A[S]> : void }[keyof A]
type Input<S> = S extends z.ZodType ? z.output<S> : undefined

/** An answer with a status or headers of its own. */
export class Reply<T> {
  constructor(
    readonly status: number,
    readonly body: T,
    readonly headers: Readonly<Record<string, string>> = {},
  ) {}
}

/** Answers with this status instead of the route's first. */
export const reply = <T>(status: number, body: T, headers: Record<string, string> = {}): Reply<T> =>
  new Reply(status, body, headers)

export interface RequestFacts {
  /** Also the `instance` of problem documents and `request` in the log. */
  id: string
  /** Of the client, as far as a configured proxy tells it. */
  address: string
  log: Logger
  /** The client's own key for this request, when the route is idempotent and one was sent. */
  idempotencyKey: string | null
}

export interface Context<R extends RouteRole, B, Q, P> {
  body: Input<B>
  query: Input<Q>
  params: Input<P>
  person: R extends 'none' ? SignedIn | null : SignedIn
  request: RequestFacts
  /** For sign-in and its like alone. */
  express: { req: Request; res: Response }
}

export interface RouteOptions<R extends RouteRole, B, Q, P, A extends Answers> {
  /** Least role that may call it; none: also without sign-in. */
  role: R
  /** A repeated call with the same Idempotency-Key gets the first answer again. */
  idempotent?: boolean
  body?: B
  query?: Q
  params?: P
  answer: A
  /** Whether the session is opened although no role is needed. */
  session?: boolean
  /** Content types taken; JSON when nothing is said. */
  takes?: readonly string[]
  /** Largest body, such as 16kb; 1mb when nothing is said. */
  bodyLimit?: string
}

export interface Route {
  method: Method
  path: string
  options: RouteOptions<RouteRole, z.ZodType | undefined, z.ZodType | undefined, z.ZodType | undefined, Answers>
  handle: (context: Context<RouteRole, never, never, never>) => unknown
}

/**
 * One declaration of a route: it feeds Express, validation, the role check and the description of the interface.
 * @param operation method and path, as `POST /api/blocks/:code/compute`
 * @param handler gives the body of the first answer, or a `reply(status, body)`
 */
export function route<
  const R extends RouteRole,
  const A extends Answers,
  B extends z.ZodType | undefined = undefined,
  Q extends z.ZodType | undefined = undefined,
  P extends z.ZodType | undefined = undefined,
>(
  operation: `${Method} /${string}`,
  options: RouteOptions<R, B, Q, P, A>,
  handler: (
    context: Context<R, B, Q, P>,
  ) =>
    | BodyOf<A>
    | Reply<BodyOf<A>>
    | Promise<BodyOf<A>>
    | Promise<Reply<BodyOf<A>>>
    | Promise<BodyOf<A> | Reply<BodyOf<A>>>,
): Route {
  const [method, path] = operation.split(' ') as [Method, string]
  return { method, path, options: options as Route['options'], handle: handler as unknown as Route['handle'] }
}
