const LONGEST_SOURCE = 200

/**
 * Text of a file as it may be shown and stored: line ends and tabs as one space, other control characters as '?', and
 * no half of a character that UTF-16 writes as two. PostgreSQL refuses U+0000 and such halves in jsonb.
 * @param most length in UTF-16 code units
 */
export function printable(text: string, most: number): string {
  return text.slice(0, most).replace(/[\t\n\r]+/g, ' ').replace(/\p{Cc}/gu, '?').toWellFormed()
}

/** A cell of the header as the name of its column, the same wherever the header is read. */
export function columnSource(cell: string): string {
  return printable(cell.trim(), LONGEST_SOURCE)
}
