import { bestLap, bestSectors, lapStandings, leftOutReason, shownDifferenceS, shownSectors, sumOfBestSectors, type LapStanding } from './laps'
import type { Lap } from './schemas/days'

export interface LapRowData {
  lap: Lap
  standing: LapStanding
  /** `out`, `in`, or the lap's number. */
  name: string
  isBest: boolean
  /** Behind the best lap of the outing, s; null for the best itself and for out and in laps. */
  behindS: number | null
  /** As shown, on whole milliseconds; as many as the table has columns. */
  sectors: { timeS: number | null, isBest: boolean }[]
  /** What is to be known about the lap, in words; empty for a plain one. */
  notes: string[]
}

export interface LapTableData {
  rows: LapRowData[]
  sectorCount: number
  bestSectorsS: (number | null)[]
  sumOfBestS: number | null
  best: Lap | null
}

/**
 * The laps of one outing as its page lists them. Bests are of counted laps only: an excluded one marks nothing.
 * @param logs those of the outing; with laps of more than one of them, each lap says from which it is
 */
export function lapTable(laps: readonly Lap[], logs: readonly { id: string, fileName: string }[] = []): LapTableData {
  const several = new Set(laps.map(lap => lap.logId)).size > 1
  const fileOf = (lap: Lap) => several ? logs.find(log => log.id === lap.logId)?.fileName ?? '' : ''
  const standings = lapStandings(laps)
  const counted = laps.filter((_, i) => standings[i] === 'counted')
  const best = bestLap(counted)
  const bestSectorsS = bestSectors(counted)
  const sectorCount = Math.max(0, ...laps.map(lap => lap.sectorsS.length))
  return {
    sectorCount: sectorCount > 1 ? sectorCount : 0,
    bestSectorsS,
    sumOfBestS: sumOfBestSectors(counted),
    best,
    rows: laps.map((lap, i) => {
      const standing = standings[i]!
      const shown = shownSectors(lap)
      return {
        lap,
        standing,
        name: lap.kind === 'timed' ? String(lap.number) : lap.kind,
        isBest: lap === best,
        behindS: best && lap.kind === 'timed' && lap !== best ? shownDifferenceS(lap.timeS, best.timeS) : null,
        sectors: Array.from({ length: sectorCount > 1 ? sectorCount : 0 }, (_, k) => {
          const timeS = shown[k] ?? null
          return { timeS, isBest: standing === 'counted' && timeS !== null && timeS === bestSectorsS[k] }
        }),
        notes: notes(lap, standing, fileOf(lap)),
      }
    }),
  }
}

function notes(lap: Lap, standing: LapStanding, file: string): string[] {
  return [
    file && `from ${file}`,
    leftOutReason(lap, standing),
    lap.flags.includes('gap_at_line') && standing !== 'gap' ? 'no fix at a line' : '',
    lap.flags.includes('missed_sector') ? 'missed a sector line' : '',
  ].filter(Boolean)
}

/** Two laps for the comparison: the slower one is examined, the faster one is what it is held against. */
export function comparePair(chosen: readonly Lap[], best: Lap | null): { lap: Lap, against: Lap } | null {
  const [a, b] = chosen.length === 1 && best && chosen[0]!.id !== best.id ? [chosen[0]!, best] : chosen
  if (!a || !b || a.id === b.id) return null
  return a.timeS >= b.timeS ? { lap: a, against: b } : { lap: b, against: a }
}
