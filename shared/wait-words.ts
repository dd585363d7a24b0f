/**
 * When to try again, rounded up so that it is never too early: `in 20 seconds`, `in 7 minutes`.
 * @param seconds more than 0
 */
export function waitInWords(seconds: number): string {
  if (seconds < 60) return `in ${words(Math.ceil(seconds), 'second')}`
  return `in ${words(Math.ceil(seconds / 60), 'minute')}`
}

function words(count: number, unit: string): string {
  return `${count} ${unit}${count === 1 ? '' : 's'}`
}
