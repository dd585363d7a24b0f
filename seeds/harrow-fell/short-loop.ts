import { makeToDegrees, type Degrees } from './geodesy'

/** A car park oval, driven at a steady speed: small enough to read, with a lap time known from its own geometry. */
export const SHORT_LOOP = {
  origin: { latitudeDeg: 54.391, longitudeDeg: -2.93 } satisfies Degrees,
  straightM: 36,
  radiusM: 14,
  /** 25 mph: the international mile is 1609.344 m (NIST SP 811, appendix B.8). */
  speedMps: 25 * 0.44704,
  rateHz: 10,
  startedAt: '2026-05-09T10:15:00.000Z',
  /** The log begins this far before the line and holds this many whole laps after it, and a little more. */
  leadM: 20,
  laps: 2,
} as const

/** Length and time of a lap, in closed form. The line crosses the middle of the northern straight, at the origin. */
export function shortLoopLap(): { lengthM: number, timeS: number } {
  const lengthM = 2 * SHORT_LOOP.straightM + 2 * Math.PI * SHORT_LOOP.radiusM
  return { lengthM, timeS: lengthM / SHORT_LOOP.speedMps }
}

/** The oval as CSV text: ISO 8601 times, degrees to eight decimals (about a millimetre), miles an hour. */
export function shortLoopCsv(): string {
  const { rateHz, speedMps, leadM, laps, startedAt } = SHORT_LOOP
  const toDegrees = makeToDegrees(SHORT_LOOP.origin)
  const wayM = leadM + laps * shortLoopLap().lengthM + leadM
  const rows = Math.floor(wayM / speedMps * rateHz) + 1
  const startMs = Date.parse(startedAt)
  const lines = ['Time,Latitude,Longitude,Speed (mph)']
  for (let i = 0; i < rows; i++) {
    const { eastM, northM } = ovalAt(speedMps * i / rateHz - leadM)
    const place = toDegrees(eastM, northM)
    const time = new Date(startMs + i * 1000 / rateHz).toISOString()
    lines.push([time, place.latitudeDeg.toFixed(8), place.longitudeDeg.toFixed(8), (speedMps / 0.44704).toFixed(1)].join(','))
  }
  return lines.join('\n') + '\n'
}

/** Clockwise: east along the northern straight, round, west along the southern one, round. */
function ovalAt(alongM: number): { eastM: number, northM: number } {
  const { straightM, radiusM } = SHORT_LOOP
  const { lengthM } = shortLoopLap()
  const bendM = Math.PI * radiusM
  // Counted from where the northern straight begins.
  const s = (((alongM + straightM / 2) % lengthM) + lengthM) % lengthM
  const half = s % (straightM + bendM)
  const turn = Math.max(0, half - straightM) / radiusM
  const side = s < straightM + bendM ? 1 : -1
  const x = Math.min(half, straightM) - straightM / 2 + radiusM * Math.sin(turn)
  const y = radiusM * Math.cos(turn)
  return { eastM: side * x, northM: side * y - radiusM }
}
