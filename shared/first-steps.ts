import { bestLap, countedLaps } from './laps'
import type { Circuit } from './schemas/circuits'
import type { OutingSummary } from './schemas/days'
import type { Car } from './schemas/setups'

/** What the book holds on the way to its first laps. */
export interface FirstBook {
  circuits: readonly Pick<Circuit, 'id' | 'name' | 'layouts'>[]
  cars: readonly Pick<Car, 'id' | 'name' | 'setups'>[]
  /** The newest day with what was driven on it; null where there is none. */
  day: { id: string, date: string, outings: readonly Pick<OutingSummary, 'id' | 'number' | 'layout' | 'logs' | 'laps'>[] } | null
}

export interface FirstStep {
  title: string
  /** What happens at this step, for somebody who has never done it. */
  about: string
  /** What the book holds of it; empty while nothing. */
  has: string
  done: boolean
  /** What is to be done here now; the first one of all steps is the next. */
  action: { label: string, to: string }
}

/**
 * The five steps from an empty book to laps, each with what is there and what is missing. A step counts as done by what
 * the book holds, however it came there, so that leaving and coming back loses nothing.
 * @param dateText writes a calendar date as the person reads it
 */
export function firstSteps(book: FirstBook, dateText: (date: string) => string): FirstStep[] {
  return [circuitStep(book), carStep(book), dayStep(book, dateText), logStep(book), linesStep(book)]
}

/** The first step that is not done; null when the first laps are there. */
export function nextStep(steps: readonly FirstStep[]): FirstStep | null {
  return steps.find(step => !step.done) ?? null
}

function circuitStep({ circuits }: FirstBook): FirstStep {
  const whole = circuits.find(circuit => circuit.layouts.length > 0)
  const [begun] = circuits
  return {
    title: 'A circuit and the way round it',
    about: 'The place, and a layout: one way round. No map is needed.',
    has: whole ? `${whole.name}, ${whole.layouts[0]!.name}` : begun ? `${begun.name}, without a layout so far` : '',
    done: Boolean(whole),
    action: begun ? { label: 'Add its layout', to: `/circuits/${begun.id}` } : { label: 'Add a circuit', to: '/circuits/new' },
  }
}

function carStep({ cars }: FirstBook): FirstStep {
  const whole = cars.find(car => car.setups.length > 0)
  const [begun] = cars
  return {
    title: 'A car and its setup sheet',
    about: 'Fill in the settings you know; what is left open is “not set”.',
    has: whole ? `${whole.name}, revision ${whole.setups[0]!.number}` : begun ? `${begun.name}, without a setup sheet so far` : '',
    done: Boolean(whole),
    action: begun ? { label: 'Write its setup sheet', to: `/cars/${begun.id}/setups/new` } : { label: 'Add a car', to: '/cars/new' },
  }
}

function dayStep({ day }: FirstBook, dateText: (date: string) => string): FirstStep {
  const outing = day?.outings[0]
  return {
    title: 'A track day and an outing',
    about: 'The date, then one trip onto the track: which car, which setup, who drove.',
    has: outing ? `outing ${outing.number} of ${dateText(day!.date)}` : day ? `${dateText(day.date)}, without an outing so far` : '',
    done: Boolean(outing),
    action: day ? { label: 'Add an outing', to: `/days/${day.id}/outings/new` } : { label: 'Add a track day', to: '/days/new' },
  }
}

/** The outing on which the next thing happens: one whose log is furthest, else the first. */
function furthest({ day }: FirstBook) {
  const outings = day?.outings ?? []
  return outings.find(outing => outing.laps.length > 0)
    ?? outings.find(outing => outing.logs.some(log => log.status !== 'refused'))
    ?? outings[0]
}

function logStep(book: FirstBook): FirstStep {
  const outing = furthest(book)
  const log = outing?.logs.find(each => each.status !== 'refused') ?? outing?.logs[0]
  const refused = log?.status === 'refused'
  const waits = log?.status === 'mapping'
  return {
    title: 'The log of the outing',
    about: 'Drop the file your logger wrote: a CSV with time, latitude and longitude. Confirm once what its columns are.',
    has: !log ? '' : waits ? `${log.fileName}, columns to be confirmed` : refused ? `${log.fileName} was refused` : log.fileName,
    done: Boolean(log) && !waits && !refused,
    action: waits
      ? { label: 'Confirm the columns', to: `/logs/${log.id}` }
      : { label: refused ? 'See why, and try another file' : 'Hand over the log', to: outing ? `/outings/${outing.id}` : '/days' },
  }
}

function linesStep(book: FirstBook): FirstStep {
  const outing = furthest(book)
  const log = outing?.logs.find(each => each.status === 'no_lines')
  return {
    title: 'The timing lines, and the laps',
    about: 'Draw the start/finish line on the trace of your own log. The laps are cut at once; then any two can be compared.',
    has: outing?.laps.length ? `laps of outing ${outing.number}` : outing?.layout.lineCount ? 'lines are drawn' : '',
    done: Boolean(outing?.laps.length),
    action: log && outing && outing.layout.lineCount === 0
      ? { label: 'Draw the timing lines', to: `/layouts/${outing.layout.id}?log=${log.id}` }
      : { label: 'See how far it is', to: outing ? `/outings/${outing.id}` : '/days' },
  }
}

/**
 * The best lap of each of two outings of a day, on the same layout and with different setups if there are such: what a
 * newcomer may hold against each other first. Null where there are no two.
 */
export function firstComparison(
  outings: readonly Pick<OutingSummary, 'id' | 'number' | 'layout' | 'setup' | 'laps'>[],
): { lap: string, against: string } | null {
  const best = outings.flatMap((outing) => {
    const lap = bestLap(countedLaps(outing.laps))
    return lap ? [{ outing, lap }] : []
  })
  for (const other of [true, false]) {
    for (const [i, a] of best.entries()) {
      const b = best.slice(i + 1).find(each => each.outing.layout.id === a.outing.layout.id
        && (!other || each.outing.setup.id !== a.outing.setup.id))
      if (b) return { lap: b.lap.id, against: a.lap.id }
    }
  }
  return null
}
