import type { Me } from '../../shared/schemas/people'
import type { Transaction } from './db/transactions'

/** Who this person is, with their teams by name. */
export async function readMe(db: Transaction, userId: string): Promise<Me> {
  const user = await db('users').where('id', userId).first<{ id: string, name: string, email: string }>('id', 'name', 'email')
  const teams = await db('teams as t')
    .join('memberships as m', 'm.team_id', 't.id')
    .where('m.user_id', userId).whereNull('m.left_at')
    .orderBy('m.joined_at').orderBy('t.name')
    .select<Me['teams']>('t.id', 't.name', 'm.role')
  return { ...user, teams }
}
