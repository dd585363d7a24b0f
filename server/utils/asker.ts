import { createHash } from 'node:crypto'
import { getRequestHeader, setResponseHeader, type H3Event } from 'h3'
import { asNobody } from './db/transactions'
import { ProblemError, signInNeeded } from './problems'

/** Who sent a request: a person with the epoch of their session, or that of today for a token. */
export interface Asker { userId: string, epoch: number | undefined }

/** The token of an Authorization header, or null where there is none; other schemes are those of a proxy before us. */
export function bearerOf(event: H3Event): string | null {
  const header = getRequestHeader(event, 'authorization')
  const found = header === undefined ? null : /^Bearer(?: +(.*))?$/i.exec(header.trim())
  return found ? found[1] ?? '' : null
}

/** What is kept of a token. It holds 256 random bits, so a plain hash cannot be turned back by trying. */
export function hashToken(token: string): string {
  return createHash('sha256').update(token).digest('hex')
}

/**
 * The person whose token or session came with a request; asked once for each request. A token that is there counts
 * alone: a wrong one is not made good by a session.
 * @throws {ProblemError} 401
 */
export async function askerOf(event: H3Event): Promise<Asker> {
  event.context.lapwrightAsker ??= await findAsker(event)
  return event.context.lapwrightAsker as Asker
}

async function findAsker(event: H3Event): Promise<Asker> {
  const token = bearerOf(event)
  if (token !== null) return holderOf(event, token)
  const { user, epoch } = await getUserSession(event)
  if (!user) throw signInNeeded()
  return { userId: user.id, epoch }
}

async function holderOf(event: H3Event, token: string): Promise<Asker> {
  const { rows: [holder] } = await asNobody(db => db.raw<{ rows: { user_id: string, session_epoch: number }[] }>(
    'select * from app.use_token(?)', [hashToken(token)]))
  if (holder) return { userId: holder.user_id, epoch: holder.session_epoch }
  setResponseHeader(event, 'www-authenticate', 'Bearer realm="Lapwright", error="invalid_token"')
  throw new ProblemError(401, 'Token not valid', 'This token is not one of Lapwright, has expired, or was revoked. Make a new one on the account page.')
}
