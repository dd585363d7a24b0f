import { randomUUID } from 'node:crypto'
import { defineEventHandler, getQuery, getRequestHeader, getRouterParams, setResponseHeader, setResponseStatus } from 'h3'
import type { EventHandler, H3Event } from 'h3'
import type { z } from 'zod'
import { findPlace, loadPerson, type Person, type Place, type Who } from './access'
import { askerOf, bearerOf } from './asker'
import { asNobody, asPerson, type Transaction } from './db/transactions'
import { badInput, ProblemError, problemOf } from './problems'
import { readJson } from './read-json'

/** How soon to ask again when the database was away. */
const AWAY_S = 5

type Schema = z.ZodType | undefined
type Parsed<S> = S extends z.ZodType ? z.output<S> : undefined

interface Input<P, Q, B> {
  event: H3Event
  params: Parsed<P>
  query: Parsed<Q>
  body: Parsed<B>
}

/** What a route says of itself, read by the wrapper and by its description at /api/openapi.json. */
export interface RouteDefinition<P extends Schema = Schema, Q extends Schema = Schema, B extends Schema = Schema,
  W extends Who = Who, A extends Schema = Schema> {
  /** What the route is for, in a sentence. */
  about: string
  params?: P
  query?: Q
  body?: B
  who: W
  /** Status of a good answer; when not said 200, or 204 where there is no answer. */
  status?: number
  /** Another good status, when there was nothing to do. The handler sets it. */
  elseStatus?: number
  /** What a good answer holds; `undefined` is none. Answers are typed by it, and tests hold them against it. */
  answer: A
  /** The body is a form whose one part is a file. */
  takesFile?: boolean
  /** The answer is a stream of server-sent events, each of which holds `answer`. */
  sendsEvents?: boolean
}

type Answered<A> = A extends z.ZodType ? z.input<A> : undefined

type Definition<P extends Schema, Q extends Schema, B extends Schema, W extends Who, A extends Schema>
  = RouteDefinition<P, Q, B, W, A> & {
    handler: (context: Input<P, Q, B> & Asked<W> & Database<W>) => Promise<Answered<A>>
  }

/**
 * What belongs to nobody (registration, sign-in) opens its own short transactions, since hashing a password between
 * them takes long; all else runs in one transaction as the person.
 */
type Database<W> = W extends 'anyone' ? { nobody: ShortTransaction } : { db: Transaction }

type Asked<W> = W extends 'anyone' ? object : W extends 'person' ? { person: Person } : { person: Person } & Place

/** Opens one short transaction as the person of the request. */
export type ShortTransaction = <T>(run: (db: Transaction) => Promise<T>) => Promise<T>

type StreamDefinition<P extends Schema, Q extends Schema, B extends Schema, W extends Who, A extends Schema>
  = RouteDefinition<P, Q, B, W, A> & {
    /** Runs outside any transaction. */
    stream: (context: Input<P, Q, B> & Asked<W> & { transaction: ShortTransaction }) => Promise<unknown>
  }

/**
 * The one way to make a route: who asks, is the input right, do one thing, answer. The handler runs in one short
 * transaction as the person; errors are answered as problem details (RFC 9457).
 */
export function defineApiHandler<
  P extends Schema, Q extends Schema, B extends Schema, W extends Who, A extends Schema,
>(
  definition: Definition<P, Q, B, W, A>,
) {
  return describe(definition, event => answer(event, async () => {
    guardOrigin(event)
    // Who asks comes first: a stranger is not told what is wrong with a body.
    if (definition.who !== 'anyone') await askerOf(event)
    const input = readInput(event, definition)
    if (definition.body) input.body = parse('body', definition.body, await readJson(event))
    const body = definition.who === 'anyone'
      ? await definition.handler({ ...input, nobody: asNobody } as never)
      : await inTransaction(event, definition.who, input, (db, asked) =>
          definition.handler({ ...input, ...asked, db } as never))
    setResponseStatus(event, definition.status ?? (body === undefined ? 204 : 200))
    return body ?? null
  }))
}

/**
 * The same for uploads, server-sent events, and whatever else takes its time (hashing a password, removing files): they
 * must not hold a transaction while they run.
 */
export function defineStreamHandler<
  P extends Schema, Q extends Schema, B extends Schema, W extends Exclude<Who, 'anyone'>, A extends Schema,
>(
  definition: StreamDefinition<P, Q, B, W, A>,
) {
  return describe(definition, event => answer(event, async () => {
    guardOrigin(event)
    const input = readInput(event, definition)
    const asked = await inTransaction(event, definition.who, input, async (_db, found) => found)
    if (definition.body) input.body = parse('body', definition.body, await readJson(event))
    const { person } = asked as { person: Person }
    // A stream can outlive its session, which a new password ends.
    const transaction: ShortTransaction = run => asPerson(person.id, async (db) => {
      await loadPerson(db, person.id, person.epoch)
      return run(db)
    })
    return definition.stream({ ...input, ...asked, transaction } as never)
  }))
}

/** An event handler that carries what its route says of itself. */
export interface DescribedHandler extends EventHandler { route: RouteDefinition }

function describe(definition: RouteDefinition, handle: (event: H3Event) => Promise<unknown>): DescribedHandler {
  return Object.assign(defineEventHandler(handle), { route: definition })
}

function readInput(event: H3Event, definition: { params?: z.ZodType, query?: z.ZodType }) {
  return {
    event,
    params: definition.params ? parse('path', definition.params, getRouterParams(event)) : undefined,
    query: definition.query ? parse('query', definition.query, getQuery(event)) : undefined,
    body: undefined as unknown,
  }
}

function parse(where: 'body' | 'query' | 'path', schema: z.ZodType, value: unknown): unknown {
  const result = schema.safeParse(value)
  if (!result.success) throw badInput(where, result.error)
  return result.data
}

async function inTransaction<T>(
  event: H3Event,
  who: Exclude<Who, 'anyone'>,
  input: { params: unknown, query: unknown },
  run: (db: Transaction, asked: object) => Promise<T>,
): Promise<T> {
  const { userId, epoch } = await askerOf(event)
  return asPerson(userId, async (db) => {
    const person = await loadPerson(db, userId, epoch)
    if (who === 'person') return run(db, { person })
    const ids = { ...(input.query as { teamId?: string }), ...(input.params as { id?: string }) }
    return run(db, { person, ...await findPlace(db, person, who, ids) })
  })
}

/** A page of another site must not act with this person's cookie. A token is never sent unasked. */
function guardOrigin(event: H3Event): void {
  if (event.method === 'GET' || event.method === 'HEAD' || bearerOf(event) !== null) return
  const site = getRequestHeader(event, 'sec-fetch-site')
  if (site === 'cross-site' || site === 'same-site') {
    throw new ProblemError(403, 'From another site', 'This request came from a page of another site and was not carried out.')
  }
}

async function answer(event: H3Event, run: () => Promise<unknown>): Promise<unknown> {
  setResponseHeader(event, 'cache-control', 'private, no-store')
  try {
    return await run()
  }
  catch (error) {
    const requestId = randomUUID()
    const known = problemOf(error)
    if (!known) console.error(`[${requestId}] ${event.method} ${event.path}`, error)
    const { problem } = known ?? new ProblemError(500, 'Something went wrong here', 'The fault is ours, not yours; nothing was changed. Try again, and if it stays, tell us the request id.')
    if (event.node.res.headersSent) return undefined
    setResponseStatus(event, problem.status)
    if (problem.status === 503) setResponseHeader(event, 'retry-after', AWAY_S)
    setResponseHeader(event, 'content-type', 'application/problem+json')
    return { ...problem, requestId }
  }
}
