import type { z } from 'zod'
import type { Problem } from '../../shared/schemas/common'
import { LapsError } from './laps/errors'

/** An error that a person can act on. The wrapper of the routes answers it as RFC 9457 problem details. */
export class ProblemError extends Error {
  readonly problem: Problem

  constructor(status: number, title: string, detail: string, more: Partial<Pick<Problem, 'errors' | 'see' | 'type'>> = {}) {
    super(detail)
    this.name = 'ProblemError'
    this.problem = { type: more.type ?? 'about:blank', title, status, detail, errors: more.errors, see: more.see }
  }
}

export function badInput(where: 'body' | 'query' | 'path', error: z.ZodError): ProblemError {
  const errors = error.issues.slice(0, 50).map(issue => ({ path: issue.path.join('.'), message: issue.message }))
  const first = errors[0]
  const detail = first ? `${first.path || where}: ${first.message}.` : 'The request could not be read.'
  return new ProblemError(400, where === 'body' ? 'Some fields need a look' : 'The address is not right', detail, { errors })
}

/** Absent, or of another team: which of the two is not told. */
export function notFound(what = 'page'): ProblemError {
  return new ProblemError(404, 'Not found', `There is no such ${what} in your teams.`)
}

export function notAllowed(role: string): ProblemError {
  return new ProblemError(403, 'Not yours to do', `Your role in this team is ${role}, which may read this but not change it. An owner of the team can.`)
}

export function signInNeeded(): ProblemError {
  return new ProblemError(401, 'Sign in first', 'You are not signed in, or your session has ended. Sign in and try again.')
}

interface Clash { status: number, title: string, detail: string, path?: string }

/** What the constraints of the database mean to a person. Names as PostgreSQL gave them in the migrations. */
const CLASHES: Record<string, Clash> = {
  users_email: { status: 409, title: 'Address taken', detail: 'There is an account with this e-mail address. Sign in with it.', path: 'email' },
  circuits_name: { status: 409, title: 'Name taken', detail: 'The team has a circuit of this name.', path: 'name' },
  layouts_name: { status: 409, title: 'Name taken', detail: 'The circuit has a layout of this name.', path: 'name' },
  cars_name: { status: 409, title: 'Name taken', detail: 'The team has a car of this name.', path: 'name' },
  logs_sha256: { status: 409, title: 'Already here', detail: 'The team has this very file already.' },
  track_days_team_id_circuit_id_fkey: { status: 422, title: 'No such circuit', detail: 'This circuit is not one of the team’s.', path: 'circuitId' },
  outings_team_id_circuit_id_layout_id_fkey: { status: 422, title: 'No such layout', detail: 'This layout is not one of the day’s circuit.', path: 'layoutId' },
  outings_team_id_car_id_fkey: { status: 422, title: 'No such car', detail: 'This car is not one of the team’s.', path: 'carId' },
  outings_team_id_car_id_setup_revision_id_fkey: { status: 422, title: 'No such setup', detail: 'This setup revision is not one of the car’s.', path: 'setupId' },
  outings_team_id_driver_id_fkey: { status: 422, title: 'No such driver', detail: 'This person is not a member of the team.', path: 'driverId' },
  outings_team_id_circuit_id_day_id_fkey: { status: 409, title: 'Circuit in use', detail: 'The day has outings at its circuit, so the circuit cannot be changed any more.', path: 'circuitId' },
  log_parts_team_id_outing_id_fkey: { status: 409, title: 'Outing removed', detail: 'The outing was removed in the meantime. Nothing was kept; choose another outing.' },
  setup_revisions_team_id_car_id_based_on_id_fkey: { status: 422, title: 'No such revision', detail: 'The sheet this one is based on is not of the same car.', path: 'basedOnId' },
}

const STILL_NAMED: Clash = { status: 409, title: 'Still in use', detail: 'Something else came to stand on this in the meantime. Read it again, and remove that first.' }
const DAY_REMOVED: Clash = { status: 409, title: 'Day removed', detail: 'The day was removed in the meantime, so nothing can be put on it.' }

interface DatabaseError extends Error { code?: string, constraint?: string, detail?: string }

/** A foreign key speaks of both its ends: of a row that would name nothing, and of one that is still named. */
function clashOf(constraint: string, stillNamed: boolean): Clash | undefined {
  const ofDay = constraint === 'outings_team_id_circuit_id_day_id_fkey'
  if (stillNamed && !ofDay) return STILL_NAMED
  return ofDay && !stillNamed ? DAY_REMOVED : CLASHES[constraint]
}

/** Turns whatever was thrown into a problem, or null when it is a fault of ours. */
export function problemOf(error: unknown): ProblemError | null {
  if (error instanceof ProblemError) return error
  if (error instanceof LapsError) {
    const row = error.row === undefined ? '' : ` (row ${error.row})`
    return new ProblemError(422, 'The log cannot be used', `${error.message}${row}`, { type: `urn:lapwright:log:${error.code}` })
  }
  const { code, constraint, detail } = error as DatabaseError
  const clash = constraint ? clashOf(constraint, detail?.includes('is still referenced') ?? false) : undefined
  if (clash && (code === '23505' || code === '23503')) {
    const errors = clash.path ? [{ path: clash.path, message: clash.detail }] : undefined
    return new ProblemError(clash.status, clash.title, clash.detail, { errors })
  }
  if (code === '22021' || code === '22P05') {
    return new ProblemError(400, 'Not to be kept', 'A text holds a character that cannot be stored, such as NUL. Take it out.')
  }
  if (isDatabaseAway(error as Error)) {
    return new ProblemError(503, 'The database is away', 'The database does not answer at this moment; it is being started again, perhaps. What you typed is still here: try again in some seconds.')
  }
  if (code === '42501') return new ProblemError(403, 'Not yours to do', 'Your role in this team does not allow this.')
  return null
}

/** Classes 08 and 57P of PostgreSQL's error codes, and what its driver and pool say when nobody answers. */
export function isDatabaseAway({ code = '', name, message }: Error & { code?: string }): boolean {
  return /^(08|57P)/.test(code) || ['ECONNREFUSED', 'ECONNRESET', 'EPIPE'].includes(code) || name === 'KnexTimeoutError'
    || /^Connection terminated|^Unable to acquire a connection|Client has encountered a connection error/.test(message)
}
