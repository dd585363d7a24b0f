import { steepestStretch } from './compare-series'
import { shownDifferenceS } from './laps'
import type { ComparedLap, Comparison } from './schemas/compare'
import type { Figures } from './figures'
import { asSentence, numberInWords } from './utils/format'

/** A part of a sentence: running text, a figure, or the part on which the highlighter lies. */
export interface Word { text: string, as: 'text' | 'figure' | 'mark' }

/** What a comparison found, in sentences. */
export interface Finding {
  /** Who was slower by how much, and where most of it arose. */
  lead: Word[]
  /** The rest of the account, and what two laps cannot say. */
  under: Word[]
}

/** Of a comparison, what its sectors need. */
type Sectored = Record<'lap' | 'against', Pick<ComparedLap, 'sectorsS'>> & Pick<Comparison, 'sectorLinesM'>

/** A sector of both laps. Times are rounded to the millisecond first, so that what is shown adds up. */
export interface SectorRow {
  name: string
  fromM: number
  lapS: number | null
  againstS: number | null
  differenceS: number | null
}

const text = (words: string): Word => ({ text: words, as: 'text' })
const figure = (words: string): Word => ({ text: words, as: 'figure' })
const mark = (words: string): Word => ({ text: words, as: 'mark' })

const seconds = (valueS: number, figures: Figures) => figures.number(Math.abs(valueS), 3)

/** What to call the other lap beside the first: only what tells them apart. */
export function nameAgainst(lap: ComparedLap, against: ComparedLap, figures: Pick<Figures, 'date'>): string {
  const name = `lap ${against.number}`
  if (against.outing.id === lap.outing.id) return name
  if (against.day.id === lap.day.id) return `${name} of outing ${against.outing.number}`
  return `${name} of outing ${against.outing.number} on ${figures.date(against.day.date)}`
}

/** Keys of the two laps for tables and traces; with the outing where both have the same number. */
export function lapKeys(lap: ComparedLap, against: ComparedLap): { lap: string, against: string } {
  if (lap.number !== against.number) return { lap: `lap ${lap.number}`, against: `lap ${against.number}` }
  if (lap.outing.number !== against.outing.number) {
    return { lap: `lap ${lap.number}, outing ${lap.outing.number}`, against: `lap ${against.number}, outing ${against.outing.number}` }
  }
  return { lap: 'lap on the table', against: 'lap against' }
}

/** The sectors side by side; empty where the layout has no sector line. */
export function sectorRows(comparison: Sectored): SectorRow[] {
  const { lap, against, sectorLinesM } = comparison
  if (!sectorLinesM.length) return []
  return [0, ...sectorLinesM].map((fromM, i) => {
    const lapS = lap.sectorsS[i] ?? null
    const againstS = against.sectorsS[i] ?? null
    return { name: `sector ${i + 1}`, fromM, lapS, againstS, differenceS: lapS === null || againstS === null ? null : shownDifferenceS(lapS, againstS) }
  })
}

/** A share in words, for shares that one place has of the whole difference. */
function shareWords(share: number): string {
  if (share >= 0.95) return 'Nearly all'
  if (share >= 0.85) return 'Nine tenths'
  if (share >= 0.7) return 'Three quarters'
  if (share >= 0.6) return 'Two thirds'
  return 'Half'
}

/** Where most of a difference arose, from the sectors; null when they do not tell. */
function whereBySector(rows: SectorRow[], totalS: number, figures: Figures): Word[] | null {
  if (rows.length < 2 || rows.some(row => row.differenceS === null)) return null
  const sign = totalS < 0 ? -1 : 1
  const most = rows.reduce((best, row) => row.differenceS! * sign > best.differenceS! * sign ? row : best)
  const share = most.differenceS! / totalS
  const what = totalS > 0 ? 'lost' : 'gained'
  if (share > 1.05) {
    return [mark(`${asSentence(most.name)} alone ${totalS > 0 ? 'cost' : 'gained'} ${seconds(most.differenceS!, figures)} s`), text(totalS > 0 ? '; other places gave some of it back.' : '; other places lost some of it again.')]
  }
  if (share < 0.45) return [text(`The time was ${what} in several sectors, nowhere most of it.`)]
  return [mark(`${shareWords(share)} of it was ${what} in ${most.name}`), text('.')]
}

/** Where most of a difference arose on a layout without sector lines: in an eighth of the lap. */
function whereByStation(comparison: Comparison, totalS: number, figures: Figures): Word[] | null {
  const lengthM = comparison.stationM.at(-1) ?? 0
  const found = steepestStretch(comparison.stationM, comparison.differenceS, lengthM / 8, totalS < 0 ? -1 : 1)
  if (!found) return null
  return [text(totalS > 0 ? 'Most was lost ' : 'Most was gained '), mark(`between ${figures.distance(found.fromM)} and ${figures.distance(found.toM)}`), text(': '), figure(`${seconds(found.changeS, figures)} s`), text('.')]
}

/**
 * The sentences that open a comparison. They say what was measured and where; never why, because two laps cannot tell.
 */
export function findingOf(comparison: Comparison, figures: Figures): Finding {
  const { lap, against } = comparison
  const totalS = shownDifferenceS(lap.timeS, against.timeS)
  const rows = sectorRows(comparison)
  const lead = [text(`Lap ${lap.number} `), figure(`(${figures.lapTime(lap.timeS)})`)]
  if (totalS === 0) {
    lead.push(text(` and ${nameAgainst(lap, against, figures)} took the same time, to the millisecond.`))
  }
  else {
    lead.push(text(' is '), figure(`${seconds(totalS, figures)} s`), text(` ${totalS > 0 ? 'slower' : 'faster'} than ${nameAgainst(lap, against, figures)}. `))
    lead.push(...(whereBySector(rows, totalS, figures) ?? whereByStation(comparison, totalS, figures) ?? []))
  }
  const doubts = [...doubtWords(lap), ...doubtWords(against)]
  return { lead, under: [...sectorWords(rows, figures), ...doubts, ...carWords(comparison)] }
}

function sectorWords(rows: SectorRow[], figures: Figures): Word[] {
  const known = rows.filter(row => row.differenceS !== null)
  if (!known.length) return []
  const words: Word[] = []
  for (const [i, row] of known.entries()) {
    const name = i ? `, ${row.name} ` : `${asSentence(row.name)} `
    words.push(text(name), figure(figures.difference(row.differenceS!)))
  }
  return [...words, text(' s. ')]
}

function doubtWords(lap: ComparedLap): Word[] {
  const words: Word[] = []
  if (lap.excluded) words.push(text(`Lap ${lap.number} of outing ${lap.outing.number} is excluded from its outing's figures. `))
  if (lap.flags.includes('gap_at_line')) words.push(text(`Lap ${lap.number} of outing ${lap.outing.number} has a gap in the log where it crossed a line: its time is uncertain. `))
  return words
}

function carWords(comparison: Comparison): Word[] {
  const { lap, against, setupDifferences } = comparison
  if (lap.car.id !== against.car.id) return [text('They are laps of two different cars.')]
  if (lap.outing.id === against.outing.id) return [text('Both were driven in one outing on one setup sheet. Two laps cannot say whether this is a habit or happened once.')]
  const count = setupDifferences.length
  if (!count) return [text('The setup sheets do not differ. Two laps cannot say whether the driver or the day made the difference.')]
  return [text(`${asSentence(numberInWords(count))} ${count === 1 ? 'setting differs' : 'settings differ'} between the setup sheets. Two laps cannot say whether the car, the driver or the day made the difference.`)]
}

/** The words of a sentence as plain text, for titles and tests. */
export function plain(words: readonly Word[]): string {
  return words.map(word => word.text).join('')
}
