import type { Knex } from 'knex'
import { pool } from './pool'

export type Transaction = Knex.Transaction
export type Raw = Knex.Raw

/**
 * Runs queries as nobody: row-level security shows no row of any team. For sign-in and registration, which go through
 * functions of the owner.
 */
export function asNobody<T>(run: (db: Transaction) => Promise<T>): Promise<T> {
  return pool().transaction(run)
}

/** Runs queries as a person: row-level security shows the rows of their teams. Keep it short; never across a stream. */
export function asPerson<T>(userId: string, run: (db: Transaction) => Promise<T>): Promise<T> {
  return pool().transaction(async (db) => {
    await db.raw('select set_config(\'lapwright.user_id\', ?, true)', [userId])
    return run(db)
  })
}

/** Runs queries of a job in the name of one team. */
export function asTeam<T>(teamId: string, run: (db: Transaction) => Promise<T>): Promise<T> {
  return pool().transaction(async (db) => {
    await actAsTeam(db, teamId)
    return run(db)
  })
}

/** Lets the rest of a person's transaction write what belongs to the team's own bookkeeping, once it is allowed. */
export async function actAsTeam(db: Transaction, teamId: string): Promise<void> {
  await db.raw('select set_config(\'lapwright.team_id\', ?, true)', [teamId])
}

/** Holds the numbering of a parent's children until the transaction ends, so that two people never get one number. */
export async function lockNumbers(db: Transaction, parentId: string): Promise<void> {
  await db.raw('select pg_advisory_xact_lock(hashtextextended(?, 0))', [parentId])
}
