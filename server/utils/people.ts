import { FIRST_PREFERENCES, preferencesSchema, type Me, type Preferences } from '../../shared/schemas/people'
import type { Transaction } from './db/transactions'

interface UserRow { id: string, name: string, email: string, units: string, number_language: string, sheet: string }

/** Who this person is, with their teams by name and how they read. */
export async function readMe(db: Transaction, userId: string): Promise<Me> {
  const { id, name, email, ...chosen } = await db('users').where('id', userId)
    .first<UserRow>('id', 'name', 'email', 'units', 'number_language', 'sheet')
  const teams = await db('teams as t')
    .join('memberships as m', 'm.team_id', 't.id')
    .where('m.user_id', userId).whereNull('m.left_at')
    .orderBy('m.joined_at').orderBy('t.name')
    .select<Me['teams']>('t.id', 't.name', 'm.role')
  return { id, name, email, preferences: preferencesOf(chosen), teams }
}

/** What is stored, or what everybody starts with where another version of the program has stored something else. */
function preferencesOf(row: Pick<UserRow, 'units' | 'number_language' | 'sheet'>): Preferences {
  const stored = { units: row.units, numberLanguage: row.number_language, sheet: row.sheet }
  return preferencesSchema.safeParse(stored).data ?? FIRST_PREFERENCES
}

export async function savePreferences(db: Transaction, userId: string, preferences: Preferences): Promise<void> {
  const { units, numberLanguage, sheet } = preferences
  await db('users').where('id', userId).update({ units, number_language: numberLanguage, sheet })
}
