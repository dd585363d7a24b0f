import type { Role } from './schemas/common'

/**
 * What a member may do. Routes and screens read the same table, so that a button is never shown for something that the
 * server would refuse.
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
] as const
export type Action = (typeof ACTIONS)[number]

const ALLOWED: Record<Role, readonly Action[]> = {
  owner: ACTIONS,
  driver: ACTIONS,
  crew: ['read', 'cars.write', 'setups.write', 'outings.write', 'logs.write'],
  coach: ['read'],
}

/** Whether a member with this role may do this. */
export function may(role: Role, action: Action): boolean {
  return ALLOWED[role].includes(action)
}
