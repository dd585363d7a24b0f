import type { Role } from '../../shared/schemas/common'
import { may, type Action } from '../../shared/access'
import type { Transaction } from './db/transactions'
import { notAllowed, notFound, signInNeeded } from './problems'

/** What a route speaks about; the team is found through it. */
const TABLES = {
  circuit: 'circuits',
  layout: 'layouts',
  car: 'cars',
  setup: 'setup_revisions',
  day: 'track_days',
  outing: 'outings',
  log: 'logs',
  lap: 'laps',
} as const
export type Subject = keyof typeof TABLES

/**
 * Who may use a route: anyone, any signed-in person, or a member of the team to which its subject belongs whose role
 * allows the action. `of: 'team'` takes the team from the query (`teamId`), anything else from the row that the path
 * names.
 */
export type Who = 'anyone' | 'person' | { action: Action, of: 'team' | Subject }

export interface Person {
  id: string
  /** `users.session_epoch` of the session. */
  epoch: number
  teams: { id: string, role: Role }[]
}

export interface Place {
  teamId: string
  role: Role
}

/**
 * The person of this transaction with their teams, or 401 when the session has been ended by a new password.
 */
export async function loadPerson(db: Transaction, userId: string, epoch: number | undefined): Promise<Person> {
  const rows = await db('users as u')
    .leftJoin('memberships as m', join => join.on('m.user_id', 'u.id').andOnNull('m.left_at'))
    .where('u.id', userId)
    .select<{ session_epoch: number, team_id: string | null, role: Role }[]>('u.session_epoch', 'm.team_id', 'm.role')
  if (!rows[0] || epoch === undefined || rows[0].session_epoch !== epoch) throw signInNeeded()
  return { id: userId, epoch, teams: rows.flatMap(row => row.team_id ? [{ id: row.team_id, role: row.role }] : []) }
}

/** The team of the subject and the person's role there; 404 when it is not theirs, 403 when the role is not enough. */
export async function findPlace(
  db: Transaction,
  person: Person,
  who: Exclude<Who, string>,
  ids: { teamId?: string, id?: string },
): Promise<Place> {
  let teamId = ids.teamId
  if (who.of !== 'team') {
    const row = await db(TABLES[who.of]).where('id', ids.id ?? null).first<{ team_id: string } | undefined>('team_id')
    if (!row) throw notFound(who.of)
    teamId = row.team_id
  }
  const team = person.teams.find(item => item.id === teamId)
  if (!team) throw notFound(who.of)
  if (!may(team.role, who.action)) throw notAllowed(team.role)
  return { teamId: team.id, role: team.role }
}
