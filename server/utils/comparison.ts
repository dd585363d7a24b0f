import type { ComparedLap as ComparedLapBody, Comparison } from '../../shared/schemas/compare'
import { conditionsSchema, hotPressuresSchema } from '../../shared/schemas/days'
import type { Sheet } from '../../shared/schemas/setups'
import { countSameSettings, sheetDifferences } from '../../shared/setup-fields'
import { compareLaps, type ComparedLap, type LapTrace } from './laps/compare'
import { readChannels } from './channels'
import type { Transaction } from './db/transactions'
import { notFound, ProblemError } from './problems'
import { keepRecent } from './recent'

/** Stations are this far apart: a tenth of a second at 70 km/h, finer than ordinary receivers tell. */
const STEP_M = 2
/** Samples taken before and after a lap, so that its ends can be interpolated and smoothed. */
const MARGIN_S = 2
const CHANNELS = ['time', 'latitude', 'longitude', 'speed', 'longitudinal_acceleration', 'lateral_acceleration']

interface LapRow {
  id: string
  team_id: string
  number: number
  kind: string
  start_s: number
  time_s: number
  first_sample: number | null
  last_sample: number | null
  flags: string[]
  excluded: boolean
  sectors: (number | null)[] | null
  log_id: string | null
  /** Changes with every change of the log's row, and a log that is read again changes it. */
  log_version: string | null
  rate_hz: number | null
  outing_id: string
  outing_number: number
  started_at: Date | null
  fuel_start_l: number | null
  passenger: boolean
  conditions: unknown
  hot_pressures: unknown
  day_id: string
  date: string
  time_zone: string
  layout_id: string
  layout_name: string
  circuit_name: string
  car_id: string
  car_name: string
  setup_id: string
  setup_number: number
  setup_name: string
  sheet: Sheet
  driver_id: string
  driver_name: string
}

async function readLapRow(db: Transaction, id: string): Promise<LapRow> {
  const row = await db('laps as l').leftJoin('log_parts as p', 'p.id', 'l.log_part_id').leftJoin('logs as g', 'g.id', 'p.log_id')
    .join('outings as o', 'o.id', 'l.outing_id').join('track_days as d', 'd.id', 'o.day_id').join('circuits as c', 'c.id', 'd.circuit_id')
    .join('layouts as y', 'y.id', 'o.layout_id').join('cars as r', 'r.id', 'o.car_id').join('users as u', 'u.id', 'o.driver_id')
    .join('setup_revisions as s', 's.id', 'o.setup_revision_id')
    .where('l.id', id).first<LapRow | undefined>(
      'l.id', 'l.team_id', 'l.number', 'l.kind', 'l.start_s', 'l.time_s', 'l.first_sample', 'l.last_sample', 'l.flags', 'l.excluded',
      db.raw('(select array_agg(t.time_s order by t.ordinal) from lap_sectors t where t.team_id = l.team_id and t.lap_id = l.id) as sectors'),
      'g.id as log_id', db.raw('g.xmin::text as log_version'), 'g.rate_hz', 'o.id as outing_id', 'o.number as outing_number', 'o.started_at', 'o.fuel_start_l', 'o.passenger', 'o.conditions',
      'o.hot_pressures', 'd.id as day_id', 'd.date', 'c.time_zone', 'y.id as layout_id', 'y.name as layout_name', 'c.name as circuit_name',
      'r.id as car_id', 'r.name as car_name', 's.id as setup_id', 's.number as setup_number', 's.name as setup_name', 's.sheet',
      'u.id as driver_id', 'u.name as driver_name',
    )
  if (!row) throw notFound('lap')
  return row
}

/** The samples of a lap and a little around it, read as slices of its channels. */
async function readTrace(db: Transaction, lap: LapRow): Promise<LapTrace> {
  if (lap.kind !== 'timed' || lap.log_id === null || lap.first_sample === null || lap.last_sample === null) {
    const name = `Lap ${lap.number} of outing ${lap.outing_number}`
    throw new ProblemError(422, 'Nothing to compare', `${name} is not a timed lap with a log, so it has no trace.`)
  }
  const margin = Math.ceil(MARGIN_S * (lap.rate_hz ?? 1)) + 2
  const first = Math.max(0, lap.first_sample - margin)
  const slice = { first, count: lap.last_sample + margin - first + 1 }
  const channels = await readChannels(db, lap.team_id, lap.log_id, CHANNELS, slice)
  const samples = (name: string) => channels.get(name)!.samples
  return {
    timeS: samples('time'),
    latitudeDeg: samples('latitude'),
    longitudeDeg: samples('longitude'),
    channels: Object.fromEntries([...channels].map(([name, channel]) => [name, channel.samples])),
    startS: lap.start_s,
    lapTimeS: lap.time_s,
  }
}

type Series = Pick<ComparedLapBody, 'speed' | 'longitudinal' | 'lateral' | 'source' | 'brakings'>
type Drawn = Pick<Comparison, 'stationM' | 'pathM' | 'differenceS' | 'sectorLinesM'> & { lap: Series, against: Series }

/** What is drawn of two laps costs most of a comparison, and people come back to the same two. */
const recentlyDrawn = keepRecent<Drawn>(64)

/** Whatever the drawing of a lap rests on: its cut, and the version of the log whose channels it reads. */
function stampOf(lap: LapRow) {
  const { id, log_id, log_version, start_s, time_s, first_sample, last_sample, sectors } = lap
  return [id, log_id, log_version, start_s, time_s, first_sample, last_sample, sectors]
}

/** Two timed laps of a layout held against each other by station, with what differed on the car. */
export async function readComparison(db: Transaction, lapId: string, againstId: string): Promise<Comparison> {
  const lap = await readLapRow(db, lapId)
  const against = await readLapRow(db, againstId)
  if (lap.team_id !== against.team_id || lap.layout_id !== against.layout_id) {
    throw new ProblemError(422, 'Not the same way round', 'The two laps were driven on different layouts, so there is nothing to hold them against each other by.')
  }
  const key = JSON.stringify([stampOf(lap), stampOf(against)])
  const drawn = await recentlyDrawn(key, () => draw(db, lap, against))
  return {
    teamId: lap.team_id,
    ...drawn,
    lap: { ...lapBody(lap), ...drawn.lap },
    against: { ...lapBody(against), ...drawn.against },
    setupDifferences: sheetDifferences(against.sheet, lap.sheet)
      .map(({ label, unit, a, b }) => ({ label, unit, lap: b, against: a })),
    sameSettings: countSameSettings(lap.sheet, against.sheet),
  }
}

async function draw(db: Transaction, lap: LapRow, against: LapRow): Promise<Drawn> {
  const compared = compareLaps(await readTrace(db, lap), await readTrace(db, against), { stepM: STEP_M })
  const faster = compared.reference === 'a' ? { row: lap, own: compared.a } : { row: against, own: compared.b }
  return {
    stationM: rounded(compared.stationM, 3).map(Number),
    pathM: { x: rounded(faster.own.xM, 2).map(Number), y: rounded(faster.own.yM, 2).map(Number) },
    differenceS: rounded(compared.differenceS, 4),
    sectorLinesM: sectorLines(faster.row, faster.own, compared.stationM),
    lap: seriesOf(compared.a),
    against: seriesOf(compared.b),
  }
}

function lapBody(row: LapRow): Omit<ComparedLapBody, keyof Series> {
  return {
    id: row.id,
    number: row.number,
    timeS: row.time_s,
    flags: row.flags,
    excluded: row.excluded,
    outing: { id: row.outing_id, number: row.outing_number, startedAt: row.started_at?.toISOString() ?? null },
    day: { id: row.day_id, date: row.date, timeZone: row.time_zone },
    layout: { id: row.layout_id, name: row.layout_name, circuitName: row.circuit_name },
    car: { id: row.car_id, name: row.car_name },
    setup: { id: row.setup_id, number: row.setup_number, name: row.setup_name },
    driver: { id: row.driver_id, name: row.driver_name },
    fuelStartL: row.fuel_start_l,
    passenger: row.passenger,
    conditions: conditionsSchema.parse(row.conditions),
    hotPressures: hotPressuresSchema.parse(row.hot_pressures),
    sectorsS: row.sectors ?? [],
    rateHz: row.rate_hz ?? 0,
  }
}

function seriesOf(compared: ComparedLap): Series {
  return {
    speed: rounded(compared.speedMps, 3),
    longitudinal: rounded(compared.longitudinalMps2, 3),
    lateral: rounded(compared.lateralMps2, 3),
    source: compared.source,
    brakings: compared.brakings.map(braking => ({
      onsetM: braking.onsetStationM,
      onsetSpeedMps: braking.onsetSpeedMps,
      releaseM: braking.releaseStationM,
      peakMps2: braking.peakMps2,
    })),
  }
}

/** Numbers for the wire: as many decimals as mean something, null where a value is missing. */
function rounded(values: Float64Array, digits: number): (number | null)[] {
  const scale = 10 ** digits
  const result: (number | null)[] = []
  for (const value of values) result.push(Number.isFinite(value) ? Math.round(value * scale) / scale : null)
  return result
}

/** Stations at which the faster lap crossed the sector lines, as far as it crossed them. */
function sectorLines(row: LapRow, lap: ComparedLap, stationM: Float64Array): number[] {
  const lines: number[] = []
  let elapsed = 0
  for (const sector of (row.sectors ?? []).slice(0, -1)) {
    if (sector === null) break
    elapsed += sector
    const i = lap.elapsedS.findIndex(value => value >= elapsed)
    if (i < 1) break
    const share = (elapsed - lap.elapsedS[i - 1]!) / (lap.elapsedS[i]! - lap.elapsedS[i - 1]!)
    lines.push(Math.round((stationM[i - 1]! + share * (stationM[i]! - stationM[i - 1]!)) * 10) / 10)
  }
  return lines
}
