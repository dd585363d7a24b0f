import type { DraftLine, FlatLine, FlatTrace } from '#shared/lines'
import { bestLoop, flatLine, lineWidthM, offSquareDeg, orderedLines, stationOf } from '#shared/lines'
import type { GlobePoint } from '#shared/plane'
import { makePlane } from '#shared/plane'

/** A line as the sheet shows it. Station and squareness are null while there is no trace to measure along. */
export interface ShownLine extends DraftLine {
  widthM: number
  stationM: number | null
  offSquareDeg: number | null
}

const NOWHERE = { latitudeDeg: 0, longitudeDeg: 0 }
const planeAt = (point: GlobePoint) => makePlane(point.latitudeDeg, point.longitudeDeg)

/** Where along the trace the lines of a layout are, how wide and how square, and in which order they are driven. */
export function useLineMeasures(lines: Ref<DraftLine[]>, trace: Ref<FlatTrace | null>) {
  /** The plane in which lines are moved: the trace's, or one at the first line when there is no trace. */
  const plane = computed(() => trace.value?.plane ?? planeAt(lines.value[0]?.a ?? NOWHERE))
  const flat = (line: DraftLine): FlatLine => flatLine(plane.value, line)
  const start = computed(() => lines.value.find(line => line.kind === 'start_finish') ?? null)
  const loop = computed(() => trace.value && bestLoop(trace.value, start.value && flat(start.value)))

  const shown = computed<ShownLine[]>(() => lines.value.map((line) => {
    const across = flat(line)
    const measured = trace.value && loop.value
    return {
      ...line,
      widthM: lineWidthM(across),
      stationM: measured ? stationOf(trace.value!, loop.value!, across) : null,
      offSquareDeg: measured ? offSquareDeg(trace.value!, loop.value!, across) : null,
    }
  }))

  /** Number lines in driving order, along the loop that these lines make. Without a trace they keep their order. */
  function inOrder(next: DraftLine[]): DraftLine[] {
    const first = next.find(line => line.kind === 'start_finish')
    const along = trace.value && bestLoop(trace.value, first ? flat(first) : null)
    return orderedLines(next, line => along ? stationOf(trace.value!, along, flat(line)) : line.ordinal)
  }

  return { plane, flat, start, loop, shown, inOrder }
}
