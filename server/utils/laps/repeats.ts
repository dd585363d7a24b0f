/** The timed laps of one log of an outing. */
export interface LoggedLaps {
  /** When the clock of the log read zero, seconds since 1970; null where the log does not tell the time of day. */
  zeroAtS: number | null
  laps: readonly TimedLap[]
}
interface TimedLap {
  id: string
  startS: number
  timeS: number
  /** False where its time is doubtful: such a lap does not stand in the way of another log's. */
  sure: boolean
}

/** Laps that share more than this part of the shorter one are one lap, in two logs. */
const SHARED = 0.5

/**
 * Laps that an earlier log of the same outing has already, so that none is counted twice. The log that came first
 * counts. Where one of two logs does not tell the time of day nobody knows whether they hold the same laps, and those
 * of the later one are repeated, as long as the earlier one has any that count. Cost O(n^2) of the laps of one outing.
 * @param logs the logs of one outing, the first uploaded first
 * @returns identifiers
 */
export function repeatedLaps(logs: readonly LoggedLaps[]): Set<string> {
  const repeated = new Set<string>()
  const counting = (log: LoggedLaps) => ({ ...log, laps: log.laps.filter(lap => lap.sure && !repeated.has(lap.id)) })
  for (const [i, log] of logs.entries()) {
    for (const lap of log.laps) {
      if (logs.slice(0, i).some(earlier => holds(counting(earlier), log, lap))) repeated.add(lap.id)
    }
  }
  return repeated
}

function holds(earlier: LoggedLaps, log: LoggedLaps, lap: TimedLap): boolean {
  const { zeroAtS } = log
  return earlier.laps.some((other) => {
    if (zeroAtS === null || earlier.zeroAtS === null) return true
    const [from, otherFrom] = [zeroAtS + lap.startS, earlier.zeroAtS + other.startS]
    const sharedS = Math.min(from + lap.timeS, otherFrom + other.timeS) - Math.max(from, otherFrom)
    return sharedS > SHARED * Math.min(lap.timeS, other.timeS)
  })
}
