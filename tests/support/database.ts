import process from 'node:process'
import knex, { type Knex } from 'knex'

/** A connection to the database under test, as the application's role or as its owner. */
export function connect(as: 'application' | 'owner'): Knex {
  const connection = as === 'owner' ? process.env.DATABASE_OWNER_URL : process.env.DATABASE_URL
  if (!connection) throw new Error('no database under test: run `npm test -- api`')
  return knex({ client: 'pg', connection, pool: { min: 0, max: 2 } })
}

/** Gives a person a role in a team, as an accepted invitation would. */
export async function addMember(owner: Knex, teamId: string, userId: string, role: string): Promise<void> {
  await owner('memberships').insert({ team_id: teamId, user_id: userId, role })
}
