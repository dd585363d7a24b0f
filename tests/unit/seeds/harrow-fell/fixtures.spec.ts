import { readFileSync } from 'node:fs'
import { describe, expect, it, vi } from 'vitest'
import { fixtureFiles } from '../../../../seeds/harrow-fell/fixtures'
import { makeTrack } from '../../../../seeds/harrow-fell/track'

// Seconds on a busy machine: a log is driven and written as a whole.
vi.setConfig({ testTimeout: 30_000 })

const files = fixtureFiles()

describe('fixtureFiles', () => {
  it.each(Object.keys(files))('%s in fixtures/ is what is written anew, byte for byte', (name) => {
    const onDisk = readFileSync(new URL(`../../../../fixtures/${name}`, import.meta.url), 'utf8')
    // Not toBe: a difference of two megabytes is no message.
    expect(onDisk === files[name]).toBe(true)
  })

  it('gives the same bytes when asked again', () => {
    const again = fixtureFiles()
    expect(Object.keys(files).filter(name => again[name] !== files[name])).toEqual([])
  })

  it('keeps the walk-through log under 3 MB', () => {
    expect(files['harrow-fell.csv']!.length).toBeLessThan(3e6)
  })

  it('writes the timing lines as GeoJSON, longitude first', () => {
    const collection = JSON.parse(files['harrow-fell-lines.geojson']!)
    expect(collection.features.map((f: { properties: unknown }) => f.properties)).toEqual([
      { role: 'start_finish' }, { role: 'sector', order: 1 }, { role: 'sector', order: 2 },
    ])
    const [line] = makeTrack().lines
    expect(collection.features[0].geometry).toEqual({
      type: 'LineString',
      coordinates: [line!.a, line!.b].map(p => [Number(p.longitudeDeg.toFixed(9)), Number(p.latitudeDeg.toFixed(9))]),
    })
  })
})
