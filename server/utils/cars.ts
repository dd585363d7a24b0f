import type { Car, CarBody, Setup, SetupListItem, SetupSummary } from '../../shared/schemas/setups'
import { sheetSchema } from '../../shared/schemas/setups'
import { sheetDifferences } from '../../shared/setup-fields'
import type { Transaction } from './db/transactions'
import { notFound } from './problems'
import { versionOf, type Versioned } from './versions'

interface SetupRow {
  id: string
  team_id: string
  car_id: string
  car_name: string
  number: number
  name: string
  based_on_id: string | null
  based_on_number: number | null
  sheet: unknown
  created_at: Date
  created_by_name: string | null
  outing_count: number
}

function setupRows(db: Transaction) {
  return db('setup_revisions as r')
    .join('cars as c', 'c.id', 'r.car_id')
    .leftJoin('users as u', 'u.id', 'r.created_by')
    .leftJoin('setup_revisions as b', 'b.id', 'r.based_on_id')
    .orderBy('r.number', 'desc')
    .select<SetupRow[]>('r.*', 'c.name as car_name', 'u.name as created_by_name', 'b.number as based_on_number',
      db.raw('(select count(*)::int from outings o where o.team_id = r.team_id and o.setup_revision_id = r.id) as outing_count'))
}

function summaryOf(row: SetupRow): SetupSummary {
  return {
    id: row.id,
    number: row.number,
    name: row.name,
    createdAt: row.created_at.toISOString(),
    createdByName: row.created_by_name,
    outingCount: row.outing_count,
  }
}

/** A revision as its car lists it, with what it changed. `all` holds the revisions of the same car. */
function listItemOf(row: SetupRow, all: readonly SetupRow[]): SetupListItem {
  const base = all.find(other => other.id === row.based_on_id)
  const differences = base ? sheetDifferences(sheetSchema.parse(base.sheet), sheetSchema.parse(row.sheet)) : []
  return {
    ...summaryOf(row),
    basedOnNumber: row.based_on_number,
    changes: differences.map(({ label, unit, a, b }) => ({ label, unit, from: a, to: b })),
  }
}

/** Cars of a team with their setup revisions, the newest first; or the one asked for. */
export async function readCars(db: Transaction, teamId: string, id?: string): Promise<Car[]> {
  const cars = await db('cars').where('team_id', teamId).modify(query => id && query.where('id', id)).orderBy('name')
    .select<(CarBody & Versioned & { id: string, team_id: string })[]>()
  const setups = await setupRows(db).whereIn('r.car_id', cars.map(car => car.id))
  return cars.map(car => ({
    id: car.id,
    teamId: car.team_id,
    name: car.name,
    number: car.number,
    year: car.year,
    kind: car.kind,
    notes: car.notes,
    ...versionOf(car),
    setups: setups.filter(setup => setup.car_id === car.id).map((setup, _, own) => listItemOf(setup, own)),
  }))
}

export async function readSetup(db: Transaction, id: string): Promise<Setup> {
  const row = await setupRows(db).where('r.id', id).first() as SetupRow | undefined
  if (!row) throw notFound('setup sheet')
  return {
    ...summaryOf(row),
    teamId: row.team_id,
    carId: row.car_id,
    carName: row.car_name,
    basedOnId: row.based_on_id,
    basedOnNumber: row.based_on_number,
    sheet: sheetSchema.parse(row.sheet),
  }
}
