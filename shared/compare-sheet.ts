import type { Finding } from './compare-words'
import { findingOf, lapKeys } from './compare-words'
import { extentOf, widestApart } from './compare-series'
import { shownDifferenceS } from './laps'
import type { ComparedLap, Comparison } from './schemas/compare'
import type { Figures } from './figures'

/** A lap without its traces. */
export type LapFacts = Omit<ComparedLap, 'speed' | 'longitudinal' | 'lateral'>

/** The finding of each trace, written beside its name. */
export interface TraceTitles { speed: string, difference: string, longitudinal: string, lateral: string }

/**
 * What the sheet of a comparison says without its traces: small enough to come with the page. The traces are some
 * hundred kilobytes and are fetched by the browser alone.
 */
export interface ComparisonSheet {
  lap: LapFacts
  against: LapFacts
  keys: { lap: string, against: string }
  lengthM: number
  totalS: number
  finding: Finding
  titles: TraceTitles
  /** Where the cursor stands at first: where there is most to see. */
  startM: number
  /** The faster lap's path, a point every few metres. */
  path: { stationM: number[], x: number[], y: number[] }
  sectorLinesM: number[]
  setupDifferences: Comparison['setupDifferences']
  sameSettings: number
}

/** Points of the outline that come with the page. */
const OUTLINE_POINTS = 600

/** Everything a comparison says in words and small figures. O(n). */
export function sheetOf(comparison: Comparison, figures: Figures): ComparisonSheet {
  const { lap, against, stationM, pathM } = comparison
  const stride = Math.max(1, Math.floor(stationM.length / OUTLINE_POINTS))
  const thin = (values: readonly number[]) => values
    .filter((_, i) => i % stride === 0 || i === values.length - 1)
    .map(value => Math.round(value * 10) / 10)
  return {
    lap: factsOf(lap),
    against: factsOf(against),
    keys: lapKeys(lap, against),
    lengthM: stationM.at(-1) ?? 0,
    totalS: shownDifferenceS(lap.timeS, against.timeS),
    finding: findingOf(comparison, figures),
    titles: titlesOf(comparison, figures),
    startM: widestApart(stationM, lap.speed, against.speed)?.atM ?? 0,
    path: { stationM: thin(stationM), x: thin(pathM.x), y: thin(pathM.y) },
    sectorLinesM: comparison.sectorLinesM,
    setupDifferences: comparison.setupDifferences,
    sameSettings: comparison.sameSettings,
  }
}

function factsOf(lap: ComparedLap): LapFacts {
  const { speed: _speed, longitudinal: _longitudinal, lateral: _lateral, ...facts } = lap
  return facts
}

function titlesOf(comparison: Comparison, figures: Figures): TraceTitles {
  return {
    speed: speedTitle(comparison, figures),
    difference: differenceTitle(comparison, figures),
    longitudinal: longitudinalTitle(comparison, figures),
    lateral: lateralTitle(comparison, figures),
  }
}

const NOTHING = 'not in both logs'

function speedTitle({ stationM, lap, against }: Comparison, figures: Figures): string {
  const widest = widestApart(stationM, lap.speed, against.speed)
  if (!widest) return NOTHING
  return `most apart at ${figures.distance(widest.atM)}, ${figures.speed(Math.abs(widest.by))} ${widest.by < 0 ? 'slower' : 'faster'}`
}

function differenceTitle({ stationM, differenceS, lap, against }: Comparison, figures: Figures): string {
  const furthest = widestApart(stationM, differenceS, differenceS.map(() => 0))
  if (!furthest) return NOTHING
  const atLine = figures.difference(shownDifferenceS(lap.timeS, against.timeS))
  return `${figures.difference(furthest.by, 2)} at ${figures.distance(furthest.atM)}, ${atLine} at the line`
}

function longitudinalTitle({ lap, against }: Comparison, figures: Figures): string {
  const mine = extentOf(lap.longitudinal)
  const other = extentOf(against.longitudinal)
  if (!mine || !other) return NOTHING
  return `hardest braking ${figures.g(-mine.low)} against ${figures.g(-other.low)}`
}

function lateralTitle({ lap, against }: Comparison, figures: Figures): string {
  const mine = extentOf(lap.lateral)
  const other = extentOf(against.lateral)
  if (!mine || !other) return NOTHING
  return `most to the left ${figures.g(mine.high)} against ${figures.g(other.high)}, to the right ${figures.g(-mine.low)} against ${figures.g(-other.low)}`
}
