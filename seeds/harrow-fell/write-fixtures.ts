// Writes the simulated files of fixtures/ and server/assets/ anew: npx tsx seeds/harrow-fell/write-fixtures.ts
import { writeFileSync } from 'node:fs'
import { gzipSync } from 'node:zlib'
import { demonstrationFiles } from './demonstration'
import { fixtureFiles } from './fixtures'

function write(path: string, bytes: string | Buffer): void {
  writeFileSync(new URL(`../../${path}`, import.meta.url), bytes)
  console.log(`${path}: ${Buffer.byteLength(bytes)} bytes`)
}

for (const [name, text] of Object.entries(fixtureFiles())) write(`fixtures/${name}`, text)
for (const [name, text] of Object.entries(demonstrationFiles())) {
  const packed = name.endsWith('.csv')
  write(`server/assets/demonstration/${name}${packed ? '.gz' : ''}`, packed ? gzipSync(text, { level: 9 }) : text)
}
