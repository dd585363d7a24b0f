import { randomUUID } from 'node:crypto'
import { Buffer } from 'node:buffer'
import { finished } from 'node:stream/promises'
import { z } from 'zod'
import { startingChoices } from '../../shared/log-columns'
import { circuitBody, layoutBody, timingLineSchema } from '../../shared/schemas/circuits'
import { dayBody, outingBody, type Demonstration } from '../../shared/schemas/days'
import type { LogPreview } from '../../shared/schemas/logs'
import { carBody, sheetSchema } from '../../shared/schemas/setups'
import type { ShortTransaction } from './api'
import { lockNumbers, type Transaction } from './db/transactions'
import { sniffLog } from './laps/sniff'
import { keepLog } from './log-arrival'
import { openLogSink, readLogHead, removeLogFile } from './log-files'
import type { Upload } from './log-upload'
import { outingColumns } from './outings'

const HEAD_BYTES = 65_536

/** What the demonstration writes into a team; the file is written by seeds/harrow-fell/write-fixtures.ts. */
const bookSchema = z.object({
  circuit: circuitBody,
  layout: layoutBody,
  lines: z.array(timingLineSchema),
  car: carBody,
  setups: z.array(z.object({ number: z.int(), name: z.string(), basedOn: z.int().nullable(), sheet: sheetSchema })),
  day: dayBody.omit({ circuitId: true }),
  outings: z.array(z.object({
    setup: z.int(),
    fileName: z.string(),
    /** Of the unpacked log: tells whether the team has it already. */
    sha256: z.string(),
    sheet: outingBody.omit({ layoutId: true, carId: true, setupId: true, driverId: true }),
  })),
})
type Book = z.infer<typeof bookSchema>

/** A log whose file lies in the storage already. */
interface Stored { id: string, storageKey: string, upload: Upload, preview: LogPreview }

/** Whose book it is written into. */
interface Whose { teamId: string, personId: string }

/**
 * Writes the demonstration into a team: circuit with lines, car with setup sheets, a day with outings, and hands their
 * logs to the worker. A team that has one of these logs is led to its day instead.
 */
export async function makeDemonstration(whose: Whose, transaction: ShortTransaction): Promise<Demonstration> {
  const book = bookSchema.parse(await useStorage('assets:server').getItem('demonstration:book.json'))
  const there = await transaction(db => findDay(db, whose.teamId, book))
  if (there) return { dayId: there, made: false }
  const logs: Stored[] = []
  try {
    for (const { fileName } of book.outings) logs.push(await storeLog(fileName, whose, transaction))
    return await transaction(async (db) => {
      // Two touches at once: the second finds what the first has made.
      await lockNumbers(db, whose.teamId)
      const meanwhile = await findDay(db, whose.teamId, book)
      if (meanwhile) {
        await forget(db, logs)
        return { dayId: meanwhile, made: false }
      }
      return { dayId: await writeBook(db, whose, book, logs), made: true }
    })
  }
  catch (error) {
    await transaction(db => forget(db, logs))
    throw error
  }
}

/** The day on which the team has one of the demonstration's logs. */
async function findDay(db: Transaction, teamId: string, book: Book): Promise<string | null> {
  const row = await db('logs as l').join('log_parts as p', 'p.log_id', 'l.id').join('outings as o', 'o.id', 'p.outing_id')
    .where('l.team_id', teamId).whereIn('l.sha256', book.outings.map(outing => outing.sha256)).whereNot('l.status', 'refused')
    .orderBy('o.number').first<{ day_id: string } | undefined>('o.day_id')
  return row?.day_id ?? null
}

/**
 * Brings a log from the build to the storage, as an upload would come there. Its row is there before its file, so that
 * what a killed process leaves half done is swept like any other upload.
 */
async function storeLog(fileName: string, { teamId, personId }: Whose, transaction: ShortTransaction): Promise<Stored> {
  const id = randomUUID()
  const storageKey = `${teamId}/${id}`
  const packed = await useStorage('assets:server').getItemRaw<Uint8Array>(`demonstration:${fileName}.gz`)
  if (!packed) throw new Error(`the build has no log ${fileName} for the demonstration`)
  await transaction(db => db('logs').insert({ id, team_id: teamId, file_name: fileName, storage_key: storageKey, uploaded_by: personId }))
  const sink = await openLogSink(storageKey)
  sink.stream.end(Buffer.from(packed))
  await finished(sink.stream)
  const stored = await sink.done
  const preview = sniffLog(await readLogHead(storageKey, HEAD_BYTES))
  return { id, storageKey, upload: { ...stored, fileName }, preview }
}

async function forget(db: Transaction, logs: readonly Stored[]): Promise<void> {
  await db('logs').whereIn('id', logs.map(log => log.id)).delete()
  for (const { storageKey } of logs) await removeLogFile(storageKey)
}

/** All rows of the demonstration. @returns the day's identifier */
async function writeBook(db: Transaction, whose: Whose, book: Book, logs: readonly Stored[]): Promise<string> {
  const { teamId, personId } = whose
  const add = async (table: string, row: object): Promise<string> => {
    const [made] = await db(table).insert({ team_id: teamId, ...row }).returning<{ id: string }[]>('id')
    return made!.id
  }
  const { circuit, car } = book
  const circuitId = await add('circuits', {
    name: await freeName(db, 'circuits', teamId, circuit.name), time_zone: circuit.timeZone, notes: circuit.notes,
  })
  const layoutId = await add('layouts', { circuit_id: circuitId, ...book.layout })
  for (const { kind, ordinal, a, b } of book.lines) {
    await add('timing_lines', {
      layout_id: layoutId, kind, ordinal,
      a_latitude_deg: a.latitudeDeg, a_longitude_deg: a.longitudeDeg,
      b_latitude_deg: b.latitudeDeg, b_longitude_deg: b.longitudeDeg,
    })
  }
  const carId = await add('cars', { ...car, name: await freeName(db, 'cars', teamId, car.name) })
  const setupIds = new Map<number, string>()
  for (const { number, name, basedOn, sheet } of book.setups) {
    const based_on_id = basedOn === null ? null : setupIds.get(basedOn) ?? null
    const values = { car_id: carId, number, name, based_on_id, sheet: JSON.stringify(sheet), created_by: personId }
    setupIds.set(number, await add('setup_revisions', values))
  }
  const dayId = await add('track_days', { circuit_id: circuitId, ...book.day })
  for (const [i, { setup, sheet }] of book.outings.entries()) {
    const body = { ...sheet, layoutId, carId, setupId: setupIds.get(setup)!, driverId: personId }
    const outingId = await add('outings', { day_id: dayId, circuit_id: circuitId, number: i + 1, ...outingColumns(body) })
    const { id, upload, preview } = logs[i]!
    // The columns of this log are known to be guessed right: nobody has to confirm them.
    await keepLog(db, { id, teamId, outingId }, upload, preview, { columns: startingChoices(preview, null) })
  }
  return dayId
}

/** The name, or the name with a number where the team has given it away already. */
async function freeName(db: Transaction, table: 'circuits' | 'cars', teamId: string, name: string): Promise<string> {
  const taken = new Set((await db(table).where('team_id', teamId).pluck('name') as string[]).map(each => each.toLowerCase()))
  for (let i = 1; ; i++) {
    const candidate = i === 1 ? name : `${name} (${i})`
    if (!taken.has(candidate.toLowerCase())) return candidate
  }
}
