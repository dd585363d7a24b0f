import type { Word } from './compare-words'
import type { DraftLine } from './lines'
import type { LineTrial } from './schemas/circuits'
import type { Figures } from './figures'
import { asSentence, countInWords } from './utils/format'

const text = (words: string): Word => ({ text: words, as: 'text' })

/**
 * The sentence that opens the sheet of lines: what they do to the log, or what is to be done first.
 * @param trial null while nobody knows
 * @param now whether the reader may draw, and whether these are the stored lines
 */
export function trialSentence(lines: readonly Pick<DraftLine, 'kind'>[], trial: LineTrial | null, now: { mayEdit: boolean, stored: boolean }, figures: Figures): Word[] {
  if (!lines.length) return [text(now.mayEdit ? 'No lines yet: draw the start and finish line across the track.' : 'No lines have been drawn on this layout yet.')]
  if (!lines.some(line => line.kind === 'start_finish')) return [text('Sector lines alone cut no laps: a start and finish line is missing.')]
  const subject = asSentence(countInWords(lines.length, 'line'))
  if (!trial) return [text(`${subject} on this layout.`)]
  const verb = now.stored ? (lines.length === 1 ? 'cuts' : 'cut') : 'would cut'
  if (!trial.timedLaps) return [text(`${subject} ${verb} no timed lap out of this log: the start and finish line must be crossed at least twice.`)]
  const laps = `${subject} ${verb} ${countInWords(trial.timedLaps, 'timed lap')} out of this log`
  if (trial.bestS === null) return [text(`${laps}.`)]
  return [text(`${laps}, the best in `), { text: figures.lapTime(trial.bestS), as: 'figure' }, text('.')]
}
