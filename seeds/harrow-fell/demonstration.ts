import { createHash } from 'node:crypto'
import { demoLogs } from './demo-logs'
import { PLAN } from './plan'
import { makeTrack } from './track'

/** The outings of the plan's first day that a newcomer looks around in: the baseline, and the rear springs after it. */
const SHOWN = [1, 2]

/**
 * The files of server/assets/demonstration, by name: what the server writes into the team of a newcomer, and the logs
 * it hands to the worker. The same bytes on every run; logs are packed only when they are written.
 */
export function demonstrationFiles(): Record<string, string> {
  const [day] = PLAN.days
  const logs = demoLogs().filter(log => log.date === day!.date && SHOWN.includes(log.outing.number))
  const { layout, ...circuit } = PLAN.circuit
  const book = {
    circuit,
    layout,
    lines: makeTrack().lines.map(({ kind, ordinal, a, b }) => ({ kind, ordinal, a, b })),
    car: PLAN.car,
    setups: PLAN.setups.filter(setup => logs.some(log => log.outing.setup === setup.number)),
    day: {
      date: day!.date,
      name: 'Demonstration: two outings of a made-up car',
      notes: 'Everything here is invented. Question of the day: do the stiffer rear springs pay?',
    },
    outings: logs.map(({ fileName, csv, outing }) => ({
      setup: outing.setup,
      fileName,
      sha256: createHash('sha256').update(csv).digest('hex'),
      sheet: {
        startedAt: outing.startedAt,
        fuelStartL: outing.fuelStartL,
        conditions: outing.conditions,
        hotPressures: outing.hotPressures,
        notes: outing.notes,
      },
    })),
  }
  return {
    'book.json': `${JSON.stringify(book, null, 2)}\n`,
    ...Object.fromEntries(logs.map(({ fileName, csv }) => [fileName, csv])),
  }
}
