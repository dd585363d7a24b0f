import { extentOf, pairBrakings, roundAxis, splitAtZero, tracePoints } from '#shared/compare-series'
import type { RoundAxis } from '#shared/compare-series'
import type { Comparison } from '#shared/schemas/compare'
import type { TraceLine, Upright } from '#shared/traces'

interface Trace { lines: TraceLine[], axis: RoundAxis }

const QUANTITY_OF = { speed: 'speed', longitudinal: 'acceleration', lateral: 'acceleration' } as const
const EMPTY: Trace = { lines: [], axis: { min: 0, max: 1, step: 1 } }

/** The traces of a comparison, ready to draw in the reader's units; empty until they have been fetched. */
export function useTraceLines(comparison: () => Comparison | null) {
  const figures = useFigures()
  const along = (atM: number) => figures.shown('distance', atM)
  /** Stations in the unit of the axis. */
  const stations = computed(() => comparison()?.stationM.map(along) ?? [])

  function both(channel: keyof typeof QUANTITY_OF, steps: number, withZero: boolean): Trace {
    const found = comparison()
    if (!found) return EMPTY
    const { lap, against } = found
    // None of these has a zero point to be moved.
    const scale = 1 / figures.unitOf(QUANTITY_OF[channel]).factor
    const extent = extentOf(lap[channel], against[channel]) ?? { low: 0, high: 1 }
    return {
      lines: [
        { points: tracePoints(stations.value, against[channel], scale), colour: 'var(--ref)', dashed: true },
        { points: tracePoints(stations.value, lap[channel], scale), colour: 'var(--lap)' },
      ],
      axis: roundAxis({ low: extent.low * scale, high: extent.high * scale }, steps, withZero),
    }
  }

  const speed = computed(() => both('speed', 6, false))
  const longitudinal = computed(() => both('longitudinal', 5, true))
  const lateral = computed(() => both('lateral', 6, true))
  const difference = computed<Trace>(() => {
    const found = comparison()
    if (!found) return EMPTY
    const { above, below } = splitAtZero(tracePoints(stations.value, found.differenceS, 1))
    return {
      lines: [
        { points: above, colour: 'var(--lost)', wash: 'var(--lost)' },
        { points: below, colour: 'var(--gain)' },
      ],
      axis: roundAxis(extentOf(found.differenceS) ?? { low: 0, high: 1 }, 5, true),
    }
  })
  const uprights = computed<Upright[]>(() => {
    const found = comparison()
    if (!found) return []
    const rows = pairBrakings(found.lap.brakings, found.against.brakings)
    let lastLabelM = -Infinity
    // Numbers nearer than a fortieth of the lap would overlap.
    const room = (found.stationM.at(-1) ?? 0) / 40
    return rows.flatMap((row) => {
      const label = (row.lap ?? row.against)!.onsetM - lastLabelM >= room ? String(row.number) : undefined
      if (label) lastLabelM = (row.lap ?? row.against)!.onsetM
      return [
        ...(row.against ? [{ at: along(row.against.onsetM), dashed: true, label: row.lap ? undefined : label }] : []),
        ...(row.lap ? [{ at: along(row.lap.onsetM), dashed: false, label }] : []),
      ]
    })
  })
  return { speed, difference, longitudinal, lateral, uprights }
}
