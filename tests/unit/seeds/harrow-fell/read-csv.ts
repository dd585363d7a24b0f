/** Columns of a plain numeric CSV text by header, for tests of texts that the simulation wrote. */
export function readCsv(csv: string): Record<string, number[]> {
  const [header, ...rows] = csv.trimEnd().split('\n')
  const columns = header!.split(',').map(() => [] as number[])
  for (const row of rows) {
    row.split(',').forEach((cell, i) => columns[i]!.push(Number(cell)))
  }
  return Object.fromEntries(header!.split(',').map((name, i) => [name, columns[i]!]))
}
