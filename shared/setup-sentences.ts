import type { SheetDifference } from './setup-fields'
import { countInWords } from './utils/format'

/**
 * What a revision changed, as one sentence for the head of its sheet: names for up to three settings, a count beyond.
 * @param number of the revision
 * @param basedOn number of the revision it is based on; null for a fresh sheet
 * @param filled how many settings are filled in
 */
export function revisionSentence(
  number: number, basedOn: number | null, differences: readonly SheetDifference[], filled: number,
): string {
  if (basedOn === null) {
    return `Revision ${number} is a fresh sheet, with ${filled} ${filled === 1 ? 'setting' : 'settings'} filled in.`
  }
  if (differences.length === 0) return `Revision ${number} is the same as revision ${basedOn} in every setting.`
  if (differences.length > 3) return `Revision ${number} changes revision ${basedOn} in ${countInWords(differences.length, 'place')}.`
  const names = differences.map(({ label }) => label.charAt(0).toLowerCase() + label.slice(1))
  const last = names.pop() as string
  const listed = names.length ? `${names.join(', ')} and ${last}` : last
  return `Revision ${number} changes the ${listed} of revision ${basedOn}.`
}
