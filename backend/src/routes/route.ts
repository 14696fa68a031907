import type { Action, Role } from '@maslin/shared'
import type { Request, Response } from 'express'
import type { z } from 'zod'
import type { SignedIn } from '../auth/signedIn'
import type { Config } from '../config'
import type { Database } from '../database/database'
import type { FarmRepositories } from '../repositories/inFarm'
import type { RequirementLibrary } from '../services/requirementLibrary'
import type { SolvingPool } from '../solving/pool'

/** What the whole API works with, made once at start. */
export interface Services {
  config: Config
  database: Database
  solving: Pick<SolvingPool, 'solveMix' | 'traceCurve' | 'ready'>
  /** Requirement tables and first-mix defaults, read at start by `loadRequirementLibrary`. */
  requirements: RequirementLibrary
  /** False while the server starts and while it shuts down. */
  isOpen: () => boolean
}

/** Who may call: anybody, anybody signed in, or members of the farm in the path whose role may do the action. */
export type Access = 'public' | 'signedIn' | Action

/** What a handler is given, all of it checked. */
export interface Call<Params, Query, Body> extends Services {
  params: Params
  query: Query
  body: Body
  /** The version of `If-Match`; 0 on routes that do not ask for one. */
  version: number
  /** The `Idempotency-Key`; empty on routes that do not ask for one. */
  idempotencyKey: string
  /** Throws `not_signed_in` on a public route called by nobody in particular. */
  signedIn: () => SignedIn
  /** What the caller is on this farm; throws on routes that are not about a farm. */
  role: () => Role
  /** One use case on the farm of the path, in one transaction. */
  inFarm: <T>(work: (farm: FarmRepositories) => Promise<T>) => Promise<T>
  requestId: string
  /** Aborted when the caller goes away. */
  signal: AbortSignal
  request: Request
  response: Response
}

type Output<Schema> = Schema extends z.ZodType ? z.output<Schema> : undefined
type Input<Schema> = Schema extends z.ZodType ? z.input<Schema> : void
type Schema = z.ZodType | undefined
/** What a handler returns: the answer before it is read by its schema, which lets listed fields through and no others. */
type Answered<A extends Schema> = Input<A>

interface RouteOptions<P extends Schema, Q extends Schema, B extends Schema, A extends Schema> {
  method: 'get' | 'post' | 'put' | 'patch' | 'delete'
  /** Below `/api/v1`; a farm's resource starts with `/farms/:farmId`. */
  path: string
  access: Access
  /** Ids of the path besides `farmId`, which is known. One that is no id answers 404, as an id of nothing does. */
  params?: P
  query?: Q
  body?: B
  /** Absent: 204 without a body. */
  answer?: A
  /** Status of success; default 200, or 204 without an answer. */
  status?: 201 | 204
  /**
   * For routes that change an editable thing: reads it as it stands, for the answer to a stale `If-Match`. Its presence
   * makes `If-Match` required.
   */
  current?: (call: Call<Output<P>, undefined, undefined>) => Promise<unknown>
  /** Reads `current`; default: `answer`. */
  currentAnswer?: z.ZodType
  needsIdempotencyKey?: boolean
  /** Bytes of body; default 1 MB. */
  bodyLimit?: number
  /** Longest allowed text by field, refused with 413 instead of 400. */
  longTexts?: Record<string, number>
  /** Attempts a quarter of an hour from one address. */
  attemptsPerQuarterHour?: number
  handle: (call: Call<Output<P>, Output<Q>, Output<B>>) => Promise<Answered<A>>
}

/** A route as data: what the router registers, the tests walk and a description of the API can be made from. */
export interface Route extends Omit<RouteOptions<Schema, Schema, Schema, Schema>, 'handle' | 'current'> {
  current?: (call: Call<unknown, undefined, undefined>) => Promise<unknown>
  handle: (call: Call<unknown, unknown, unknown>) => Promise<unknown>
}

/** Declares a route; the handler's types follow from the schemas. */
export function route<
  P extends Schema = undefined,
  Q extends Schema = undefined,
  B extends Schema = undefined,
  A extends Schema = undefined,
>(options: RouteOptions<P, Q, B, A>): Route {
  return options as Route
}
