import type { CutLap } from './types'

/** A lap as it is stored. */
export interface OldLap { id: string, startS: number, timeS: number, kind: string }

/**
 * Which old lap each new lap carries on, so that exclusions and links survive a moved line: the one of the same kind
 * with which it shares more than half of both durations, the largest overlap first, none twice.
 * @param old laps of one log before the line was moved, in any order
 * @param cut laps of the same log after it
 * @returns for each new lap the id of an old one, or null. O(old x cut).
 */
export function matchLaps(old: readonly OldLap[], cut: readonly CutLap[]): (string | null)[] {
  const pairs: { k: number, id: string, overlapS: number }[] = []
  for (const [k, lap] of cut.entries()) {
    for (const before of old) {
      const endS = Math.min(lap.startS + lap.timeS, before.startS + before.timeS)
      const overlapS = endS - Math.max(lap.startS, before.startS)
      const half = Math.max(lap.timeS, before.timeS) / 2
      if (before.kind === lap.kind && overlapS > half) pairs.push({ k, id: before.id, overlapS })
    }
  }
  pairs.sort((p, q) => q.overlapS - p.overlapS)
  const ids: (string | null)[] = cut.map(() => null)
  const taken = new Set<string>()
  for (const { k, id } of pairs) {
    if (ids[k] !== null || taken.has(id)) continue
    ids[k] = id
    taken.add(id)
  }
  return ids
}
