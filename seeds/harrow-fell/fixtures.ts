import { driveOuting } from './drive'
import { setupGrip } from './grip'
import { USUAL_LOG, writeLog } from './log'
import { makeRandom } from './random'
import { setupNumber } from './sheets'
import { shortLoopCsv } from './short-loop'
import { makeTrack, type Track } from './track'

/** The files of fixtures/ that come from the simulation, by name; the same bytes on every run. */
export function fixtureFiles(): Record<string, string> {
  return {
    'harrow-fell.csv': walkThroughLog(),
    'harrow-fell-lines.geojson': linesGeoJson(makeTrack()),
    'short-loop.csv': shortLoopCsv(),
  }
}

/** An evening run of eight laps before the demo's first day, on the spring baseline: the README's log. */
function walkThroughLog(): string {
  const sheet = setupNumber(1).sheet
  const outing = driveOuting(makeTrack(), {
    timedLaps: 8,
    setup: setupGrip(sheet, sheet),
    dayGrip: 0.999,
    fuelL: 24,
    traffic: { lap: 6, fromM: 1690, toM: 2060, share: 0.84 },
    line: 'driven',
  }, makeRandom(290801))
  return writeLog(outing, { ...USUAL_LOG, airC: 19 }, makeRandom(290802)).csv
}

/** The timing lines as an RFC 7946 FeatureCollection: longitude first, nine decimals (a tenth of a millimetre). */
export function linesGeoJson(track: Track): string {
  const features = track.lines.map(({ kind, ordinal, a, b }) => ({
    type: 'Feature',
    properties: kind === 'start_finish' ? { role: kind } : { role: kind, order: ordinal },
    geometry: {
      type: 'LineString',
      coordinates: [a, b].map(p => [p.longitudeDeg, p.latitudeDeg].map(value => Number(value.toFixed(9)))),
    },
  }))
  return JSON.stringify({ type: 'FeatureCollection', features }, null, 2) + '\n'
}
