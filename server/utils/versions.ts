import { CHANGED_TYPE } from '../../shared/schemas/common'
import type { Transaction } from './db/transactions'
import { ProblemError } from './problems'

/** The columns that a trigger keeps in every table whose rows a form replaces. */
export interface Versioned { version: number, changed_at: Date }

export function versionOf(row: Versioned): { version: number, changedAt: string } {
  return { version: row.version, changedAt: row.changed_at.toISOString() }
}

/**
 * Replaces a sheet as a form gives it, if it is still the one that the form was filled from.
 * @param basedOnVersion version of the sheet as it was read
 * @throws {ProblemError} 409 when it has been changed since: nothing is written
 */
export async function replaceSheet(
  db: Transaction,
  table: 'circuits' | 'layouts' | 'cars' | 'track_days' | 'outings',
  id: string,
  basedOnVersion: number,
  columns: object,
): Promise<void> {
  const changed = await db(table).where({ id, version: basedOnVersion }).update(columns)
  if (changed) return
  const now = await db(table).where('id', id).first<Versioned | undefined>('version', 'changed_at')
  const when = now ? ` at ${now.changed_at.toISOString().slice(11, 16)} UTC` : ''
  throw new ProblemError(409, 'Changed by somebody else',
    `Somebody else changed this sheet${when}, after you opened it. Nothing was saved: read it again, and save on its version ${now?.version ?? ''}.`,
    { type: CHANGED_TYPE })
}
