import { driveOuting, type DrivenOuting } from './drive'
import { setupGrip } from './grip'
import { USUAL_LOG, writeLog, type LogOptions, type OutingLog } from './log'
import { PLAN, type PlannedOuting } from './plan'
import { makeRandom } from './random'
import { setupNumber } from './sheets'
import { makeTrack } from './track'

// One for all outings, so that its fast line is worked out once.
const track = makeTrack()

export interface DemoLog extends OutingLog {
  date: string
  outing: PlannedOuting
  fileName: string
}

/**
 * The six logs of the demo, the same bytes on every run.
 * @param options what the logger does otherwise than usual, for example `{ noise: 'off' }`
 */
export function demoLogs(options: Partial<LogOptions> = {}): DemoLog[] {
  return PLAN.days.flatMap(day => day.outings.map((outing) => {
    const airC = outing.conditions.airC ?? USUAL_LOG.airC
    const log = writeLog(drivePlanned(outing), { ...USUAL_LOG, airC, ...options }, makeRandom(outing.seed + 1))
    return { date: day.date, outing, fileName: outing.fileName, ...log }
  }))
}

/** Drive an outing of the plan; its log has a random source of its own, so that noise never changes the laps. */
export function drivePlanned(outing: PlannedOuting): DrivenOuting {
  return driveOuting(track, {
    timedLaps: outing.timedLaps,
    setup: setupGrip(setupNumber(outing.setup).sheet, setupNumber(1).sheet),
    dayGrip: outing.dayGrip,
    fuelL: outing.fuelStartL,
    traffic: outing.traffic,
    line: 'driven',
  }, makeRandom(outing.seed))
}
