import { CHANNELS, channelKind, channelSlug } from './channels'
import type { ColumnChoice, ColumnMap, LogPreview, PreviewColumn } from './schemas/logs'

export interface ColumnOption { value: string, label: string }

/** Value of the choice that keeps a column in the file only. */
export const LEAVE_OUT = ''

/**
 * The name under which a column of no known kind is kept: a slug of its header, different from every other column's and
 * from the names that mean something.
 */
export function ownChannelName(columns: readonly Pick<PreviewColumn, 'index' | 'source'>[], index: number): string {
  const column = columns.find(candidate => candidate.index === index)
  const slug = channelSlug(column?.source ?? '')
  const name = (/^[a-z]/.test(slug) ? slug : `column_${slug}`).slice(0, 56)
  const taken = columns.some(other => other.index < index && channelSlug(other.source) === slug)
  return taken || channelKind(name) ? `${name}_${index + 1}` : name
}

/** What a column may become: the known channels, its own name, or nothing. */
export function channelOptions(columns: readonly PreviewColumn[], column: PreviewColumn): ColumnOption[] {
  const guessedOwn = column.channel !== null && channelKind(column.channel) === undefined
  const own = guessedOwn ? column.channel! : ownChannelName(columns, column.index)
  return [
    ...CHANNELS.map(kind => ({ value: kind.name, label: kind.label })),
    { value: own, label: `as it is: ${own}` },
    { value: LEAVE_OUT, label: 'leave out' },
  ]
}

/** Units a channel may be given in; null where any text will do. */
export function unitOptions(channel: string | null): ColumnOption[] | null {
  const kind = channel === null ? undefined : channelKind(channel)
  return kind ? kind.units.map(({ unit }) => ({ value: unit, label: unit || 'none' })) : null
}

/** The choices to begin with: those made earlier for this log, else the guesses. */
export function startingChoices(preview: LogPreview, earlier: ColumnMap | null): ColumnChoice[] {
  return preview.columns.map(({ index, source, channel, unit }) => {
    const made = earlier?.columns.find(choice => choice.index === index && choice.source === source)
    return made ? { ...made } : { index, source, channel, unit }
  })
}

/** A column with another channel. The unit goes with it: kept when the new channel knows it, else its first. */
export function withChannel(choice: ColumnChoice, channel: string | null, guess: PreviewColumn): ColumnChoice {
  const units = unitOptions(channel)
  if (units === null) return { ...choice, channel, unit: channel === guess.channel ? guess.unit : choice.unit }
  const kept = units.some(option => option.value === choice.unit)
  return { ...choice, channel, unit: kept ? choice.unit : units[0]!.value }
}

export interface ColumnCounts {
  /** Columns that are a channel Lapwright knows. */
  used: number
  /** Columns kept under their own name. */
  kept: number
  total: number
  doubtful: number
  /** What no column is, and laps cannot do without. */
  missing: string[]
}

/** How many columns are used, how many of the guesses want a look, and what is still missing. */
export function columnCounts(preview: LogPreview, choices: readonly ColumnChoice[]): ColumnCounts {
  const named = choices.filter(choice => choice.channel !== null)
  const used = named.filter(choice => channelKind(choice.channel!))
  const missing = ['time', 'latitude', 'longitude'].filter(name => !named.some(choice => choice.channel === name))
  const doubtful = choices.filter((choice, i) => {
    const guess = preview.columns[i]!
    return isGuess(choice, guess) && guess.confidence === 'likely'
  })
  const kept = named.length - used.length
  return { used: used.length, kept, total: choices.length, doubtful: doubtful.length, missing }
}

/** Whether a choice is still what the sniffer guessed. */
export function isGuess(choice: ColumnChoice, guess: PreviewColumn): boolean {
  return choice.channel === guess.channel && choice.unit === guess.unit
}
