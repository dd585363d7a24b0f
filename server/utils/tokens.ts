import { randomBytes } from 'node:crypto'
import type { NewToken, Token } from '../../shared/schemas/tokens'
import { hashToken } from './asker'
import type { Transaction } from './db/transactions'

interface Row {
  id: string
  name: string
  ending: string
  created_at: Date
  last_used_at: Date | null
  expires_at: Date | null
}

const COLUMNS = ['id', 'name', 'ending', 'created_at', 'last_used_at', 'expires_at']

/** The tokens of the person of this transaction, the newest first; those that have expired too. */
export async function readTokens(db: Transaction): Promise<Token[]> {
  const rows = await db('api_tokens').orderBy('id', 'desc').select<Row[]>(COLUMNS)
  return rows.map(tokenOf)
}

/** Makes a token of the person; what is answered is the only place that ever holds it. */
export async function makeToken(
  db: Transaction,
  userId: string,
  { name, expiresInDays }: { name: string, expiresInDays: number | null },
): Promise<NewToken> {
  const token = `lw_${randomBytes(32).toString('base64url')}`
  const [row] = await db('api_tokens').insert({
    user_id: userId,
    name,
    hash: hashToken(token),
    ending: token.slice(-4),
    expires_at: expiresInDays === null ? null : db.raw('now() + ?::int * interval \'1 day\'', [expiresInDays]),
  }).returning<Row[]>(COLUMNS)
  return { ...tokenOf(row!), token }
}

function tokenOf(row: Row): Token {
  return {
    id: row.id,
    name: row.name,
    ending: row.ending,
    createdAt: row.created_at.toISOString(),
    lastUsedAt: row.last_used_at?.toISOString() ?? null,
    expiresAt: row.expires_at?.toISOString() ?? null,
  }
}
