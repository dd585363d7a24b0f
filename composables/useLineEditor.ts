import type { Layout, SavedLine } from '#shared/schemas/circuits'
import type { DraftLine, FlatLine, FlatTrace } from '#shared/lines'
import { bestLoop, lineAt, lineWidthM, movedLine, offSquareDeg, orderedLines, stationOf, widenedLine } from '#shared/lines'
import { makePlane } from '#shared/plane'

/** A line as the sheet shows it. Station and squareness are null while there is no trace to measure along. */
export interface ShownLine extends DraftLine {
  widthM: number
  stationM: number | null
  offSquareDeg: number | null
}

/** Width of a line that nobody has drawn yet, metres: across the track and the grass beside it. */
const FIRST_WIDTH_M = 24

/**
 * The lines of a layout while they are edited: what they are, where along the trace, undo, and whether they differ from
 * what is stored. Sector lines are always numbered in driving order.
 */
export function useLineEditor(layout: Ref<Layout>, trace: Ref<FlatTrace | null>) {
  const lines = ref<DraftLine[]>(layout.value.lines.map(draftOf))
  const stored = ref(written(lines.value))
  const history = shallowRef<DraftLine[][]>([])
  const selected = ref<string | null>(null)
  let made = 0

  /** The plane in which lines are moved: the trace's, or one at the first line when there is no trace. */
  const plane = computed(() => trace.value?.plane ?? makePlane(lines.value[0]?.a ?? { latitudeDeg: 0, longitudeDeg: 0 }))
  const flat = (line: DraftLine): FlatLine => ({ a: plane.value.flat(line.a), b: plane.value.flat(line.b) })
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
  const dirty = computed(() => written(lines.value) !== stored.value)

  /** Number the lines in driving order, along the loop that these lines make. Without a trace they keep their order. */
  function inOrder(next: DraftLine[]): DraftLine[] {
    const first = next.find(line => line.kind === 'start_finish')
    const along = trace.value && bestLoop(trace.value, first ? flat(first) : null)
    return orderedLines(next, line => along ? stationOf(trace.value!, along, flat(line)) : line.ordinal)
  }

  function commit(next: DraftLine[]) {
    history.value = [...history.value.slice(-99), lines.value]
    lines.value = inOrder(next)
  }

  function undo() {
    const before = history.value.at(-1)
    if (!before) return
    history.value = history.value.slice(0, -1)
    lines.value = before
    if (!before.some(line => line.key === selected.value)) selected.value = null
  }

  /** The first line of a layout is its start and finish line, every other one ends a sector. */
  function add(ends: Pick<DraftLine, 'a' | 'b'>) {
    const key = `new-${++made}`
    commit([...lines.value, { key, kind: start.value ? 'sector' : 'start_finish', ordinal: 99, ...ends }])
    selected.value = key
  }

  /** Add a line square to the trace: at station 0, or in the middle of the longest sector so far. */
  function addSquare() {
    if (!trace.value || !loop.value) return
    const marks = shown.value.map(line => line.stationM ?? 0).sort((p, q) => p - q)
    let atM = 0
    let widest = -1
    for (const [i, fromM] of marks.entries()) {
      const toM = marks[i + 1] ?? loop.value.lengthM
      if (toM - fromM > widest) [atM, widest] = [(fromM + toM) / 2, toM - fromM]
    }
    const line = lineAt(trace.value, loop.value, atM, FIRST_WIDTH_M)
    add({ a: plane.value.globe(line.a), b: plane.value.globe(line.b) })
  }

  function replace(key: string, ends: Pick<DraftLine, 'a' | 'b'>) {
    commit(lines.value.map(line => line.key === key ? { ...line, a: ends.a, b: ends.b } : line))
  }

  function reshape(key: string, change: (line: FlatLine) => FlatLine) {
    const line = lines.value.find(one => one.key === key)
    if (!line) return
    const next = change(flat(line))
    replace(key, { a: plane.value.globe(next.a), b: plane.value.globe(next.b) })
  }

  /** Put a line square to the trace at a station of the loop as it is now. */
  function moveTo(key: string, stationM: number) {
    if (!trace.value || !loop.value) return
    const { lengthM, closed } = loop.value
    const atM = closed ? ((stationM % lengthM) + lengthM) % lengthM : Math.min(lengthM, Math.max(0, stationM))
    reshape(key, line => lineAt(trace.value!, loop.value!, atM, lineWidthM(line)))
  }

  function remove(key: string) {
    commit(lines.value.filter(line => line.key !== key))
    if (selected.value === key) selected.value = null
  }

  /** Take lines as they are stored: after saving, or in place of one's own. */
  function takeStored(from: readonly SavedLine[]) {
    lines.value = from.map(draftOf)
    stored.value = written(lines.value)
    history.value = []
    selected.value = null
  }

  return {
    lines, shown, selected, loop, dirty, undo, add, addSquare, replace, moveTo, remove, takeStored,
    canUndo: computed(() => history.value.length > 0),
    hasStart: computed(() => start.value !== null),
    widen: (key: string, widthM: number) => reshape(key, line => widenedLine(line, widthM)),
    nudge: (key: string, eastM: number, northM: number) => reshape(key, line => movedLine(line, eastM, northM)),
  }
}

function draftOf(line: SavedLine): DraftLine {
  return { key: line.id, kind: line.kind, ordinal: line.ordinal, a: line.a, b: line.b }
}

/** What of the lines is stored, as text. */
function written(lines: readonly DraftLine[]): string {
  return JSON.stringify(lines.map(({ kind, ordinal, a, b }) => ({ kind, ordinal, a, b })))
}
