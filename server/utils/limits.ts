import { createHash } from 'node:crypto'
import process from 'node:process'
import { getRequestHeader, setResponseHeader, type H3Event } from 'h3'
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible'
import { waitInWords } from '../../shared/wait-words'
import { pool } from './db/pool'
import { networkOf } from './network'
import { ProblemError } from './problems'

const QUARTER_HOUR_S = 900
const HOUR_S = 3600
const PERSON_ATTEMPTS = 10
const NETWORK_ATTEMPTS = 60
const UPLOADS_PER_HOUR = 240

interface Limiters { person: RateLimiterPostgres, network: RateLimiterPostgres, upload: RateLimiterPostgres }
const held = globalThis as typeof globalThis & { lapwrightLimiters?: Limiters }

/** How many uploads a team may begin in an hour: LAPWRIGHT_UPLOADS_PER_HOUR, 240 when not said. */
export function uploadsPerHour(): number {
  const named = process.env.LAPWRIGHT_UPLOADS_PER_HOUR
  if (!named) return UPLOADS_PER_HOUR
  if (/^[1-9]\d{0,8}$/.test(named)) return Number(named)
  throw new Error(`LAPWRIGHT_UPLOADS_PER_HOUR is "${named}"; it takes a whole number from 1.`)
}

/**
 * The counters, in a table of the database, so that several processes count together. Each statement runs on a
 * connection of its own: a request that fails and rolls back does not get its attempt back.
 */
function limiters(): Limiters {
  const make = (keyPrefix: string, points: number, duration: number) => new RateLimiterPostgres({
    storeClient: pool(), storeType: 'knex', schemaName: 'app', tableName: 'attempts', tableCreated: true,
    // The worker sweeps.
    clearExpiredByTimeout: false,
    keyPrefix, points, duration,
  })
  held.lapwrightLimiters ??= {
    person: make('person', PERSON_ATTEMPTS, QUARTER_HOUR_S),
    network: make('network', NETWORK_ATTEMPTS, QUARTER_HOUR_S),
    upload: make('upload', uploadsPerHour(), HOUR_S),
  }
  return held.lapwrightLimiters
}

/** An attempt at a password that has been counted. */
export interface PasswordAttempt {
  /** The password was right: this attempt does not count; earlier wrong ones go on counting. */
  giveBack: () => Promise<void>
}

/**
 * Counts an attempt at a password before the password is looked at, so that attempts at the same moment cannot pass
 * the limit together. Call it outside any transaction, once for each password, known address or not.
 * @param key whose password: the e-mail address as it was typed; it is kept as a hash
 * @throws {ProblemError} 429 when the person (10 in 15 minutes) or the network (60 in 15 minutes) has had its attempts
 */
export async function countPasswordAttempt(event: H3Event, key: string): Promise<PasswordAttempt> {
  const { person, network } = limiters()
  const hash = createHash('sha256').update(key.trim().toLowerCase()).digest('hex')
  const place = networkOf({
    remote: event.node.req.socket.remoteAddress,
    forwarded: getRequestHeader(event, 'x-forwarded-for'),
    trustProxy: process.env.LAPWRIGHT_TRUST_PROXY === '1',
  })
  const tooMany = (whose: string) => (wait: string) =>
    new ProblemError(429, 'Too many attempts', `There were too many wrong passwords ${whose}. Try again ${wait}.`)
  // The network first: one that has had its attempts cannot use up those of a person.
  await count(event, network, place, tooMany('from this network'))
  await count(event, person, hash, tooMany('for this account'))
  return {
    giveBack: async () => {
      await Promise.all([network.reward(place), person.reward(hash)])
    },
  }
}

/**
 * Counts an upload of a team, before a byte of it is kept.
 * @throws {ProblemError} 429
 */
export async function countUpload(event: H3Event, teamId: string): Promise<void> {
  await count(event, limiters().upload, teamId, wait => new ProblemError(429, 'Too many uploads',
    `A team may send ${uploadsPerHour()} files an hour, and yours has. Nothing is lost: send this one again ${wait}.`))
}

async function count(
  event: H3Event,
  limiter: RateLimiterPostgres,
  key: string,
  problem: (wait: string) => ProblemError,
): Promise<void> {
  try {
    await limiter.consume(key)
  }
  catch (refused) {
    if (!(refused instanceof RateLimiterRes)) throw refused
    const waitS = Math.max(1, Math.ceil(refused.msBeforeNext / 1000))
    setResponseHeader(event, 'retry-after', waitS)
    throw problem(waitInWords(waitS))
  }
}

/** Takes away the counters whose time is over. */
export async function sweepAttempts(): Promise<void> {
  await pool().withSchema('app').from('attempts').where('expire', '<', Date.now()).delete()
}
