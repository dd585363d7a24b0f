import type { Role } from './schemas/common'

/**
 * What a member may do. Routes and screens read the same table, so that a button is never shown for something that the
 * server would refuse; the policies of the migrations say it once more, and a test holds the two together.
 *
 * An owner runs the team: everything, its members included. A driver keeps the book: everything but the members. Crew
 * work on the car during the day: setup sheets, outings and their logs; the frame these stand in (circuits and lines,
 * cars, days) and the verdict on a lap are not theirs. A coach reads.
 */
export const ACTIONS = [
  'read',
  'circuits.write',
  'lines.write',
  'cars.write',
  'setups.write',
  'days.write',
  'outings.write',
  'logs.write',
  'laps.exclude',
  'members.write',
] as const
export type Action = (typeof ACTIONS)[number]

const ALLOWED: Record<Role, readonly Action[]> = {
  owner: ACTIONS,
  driver: ACTIONS.filter(action => action !== 'members.write'),
  crew: ['read', 'setups.write', 'outings.write', 'logs.write'],
  coach: ['read'],
}

/** Whether a member with this role may do this. */
export function may(role: Role, action: Action): boolean {
  return ALLOWED[role].includes(action)
}

/** The roles that may do this, the widest first. */
export function rolesThatMay(action: Action): Role[] {
  return (Object.keys(ALLOWED) as Role[]).filter(role => may(role, action))
}
