/** Words around figures. The figures themselves are written by shared/figures.ts, for each reader in their own way. */

/** Stands where a figure is missing. */
export const MISSING = '–'

/** `1 lap`, `2 laps`. */
export function formatCount(count: number, one: string, many = `${one}s`): string {
  return `${count} ${count === 1 ? one : many}`
}

const WORDS = [
  'no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten', 'eleven', 'twelve',
] as const

/** A number within a sentence: in words up to twelve, in figures beyond. */
export function numberInWords(count: number): string {
  return WORDS[count] ?? String(count)
}

/** A count within a sentence: `two laps`, `25 laps`. */
export function countInWords(count: number, one: string, many = `${one}s`): string {
  return `${numberInWords(count)} ${count === 1 ? one : many}`
}

/** The same words with a capital at their beginning. */
export function asSentence(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1)
}

/** Number, year and kind of a car as a title block writes them: `No. 47, 2006 hatchback`. */
export function carKind(car: { number: string, year: number | null, kind: string }): string {
  const kind = [car.year, car.kind].filter(Boolean).join(' ')
  return [car.number && `No. ${car.number}`, kind].filter(Boolean).join(', ') || MISSING
}
