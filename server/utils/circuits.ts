import type { Circuit, Layout, LayoutBody, SavedLine } from '../../shared/schemas/circuits'
import type { Transaction } from './db/transactions'
import { notFound } from './problems'
import { versionOf, type Versioned } from './versions'

interface LayoutRow extends Versioned {
  id: string
  team_id: string
  circuit_id: string
  circuit_name: string
  name: string
  direction: LayoutBody['direction']
  length_m: number | null
  lines_version: number
}

interface LineRow {
  id: string
  kind: SavedLine['kind']
  ordinal: number
  a_latitude_deg: number
  a_longitude_deg: number
  b_latitude_deg: number
  b_longitude_deg: number
}

/** The timing lines of a layout, the start/finish line first. */
export async function readLines(db: Transaction, layoutId: string): Promise<SavedLine[]> {
  const rows = await db('timing_lines').where('layout_id', layoutId).orderBy('ordinal').select<LineRow[]>()
  return rows.map(row => ({
    id: row.id,
    kind: row.kind,
    ordinal: row.ordinal,
    a: { latitudeDeg: row.a_latitude_deg, longitudeDeg: row.a_longitude_deg },
    b: { latitudeDeg: row.b_latitude_deg, longitudeDeg: row.b_longitude_deg },
  }))
}

export async function readLayout(db: Transaction, layoutId: string): Promise<Layout> {
  const row = await db('layouts as l').join('circuits as c', 'c.id', 'l.circuit_id')
    .where('l.id', layoutId).first<LayoutRow | undefined>('l.*', 'c.name as circuit_name')
  if (!row) throw notFound('layout')
  return {
    id: row.id,
    teamId: row.team_id,
    circuitId: row.circuit_id,
    circuitName: row.circuit_name,
    name: row.name,
    direction: row.direction,
    lengthM: row.length_m,
    linesVersion: row.lines_version,
    ...versionOf(row),
    lines: await readLines(db, layoutId),
  }
}

/** Circuits of a team with their layouts, by name; or the one asked for. */
export async function readCircuits(db: Transaction, teamId: string, id?: string): Promise<Circuit[]> {
  const circuits = await db('circuits').where('team_id', teamId)
    .modify(query => id && query.where('id', id)).orderBy('name')
    .select<(Versioned & { id: string, team_id: string, name: string, time_zone: string, notes: string })[]>()
  const layouts = await db('layouts').whereIn('circuit_id', circuits.map(circuit => circuit.id)).orderBy('name')
    .select<(LayoutRow & { line_count: number })[]>('*', db.raw(`(select count(*)::int from timing_lines t
      where t.team_id = layouts.team_id and t.layout_id = layouts.id) as line_count`))
  return circuits.map(circuit => ({
    id: circuit.id,
    teamId: circuit.team_id,
    name: circuit.name,
    timeZone: circuit.time_zone,
    notes: circuit.notes,
    ...versionOf(circuit),
    layouts: layouts.filter(layout => layout.circuit_id === circuit.id).map(layout => ({
      id: layout.id,
      name: layout.name,
      direction: layout.direction,
      lengthM: layout.length_m,
      ...versionOf(layout),
      lineCount: layout.line_count,
    })),
  }))
}
