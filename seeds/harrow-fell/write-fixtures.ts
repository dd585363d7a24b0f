// Writes the simulated files of fixtures/ anew: npx tsx seeds/harrow-fell/write-fixtures.ts
import { writeFileSync } from 'node:fs'
import { fixtureFiles } from './fixtures'

for (const [name, text] of Object.entries(fixtureFiles())) {
  writeFileSync(new URL(`../../fixtures/${name}`, import.meta.url), text)
  console.log(`fixtures/${name}: ${Buffer.byteLength(text)} bytes`)
}
