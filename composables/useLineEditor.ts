import type { Layout, SavedLine } from '#shared/schemas/circuits'
import type { DraftLine, FlatLine, FlatTrace } from '#shared/lines'
import { globeLine, lineAt, lineWidthM, movedLine, stationForNext, widenedLine } from '#shared/lines'
import { useLineMeasures } from './useLineMeasures'

type Ends = Pick<DraftLine, 'a' | 'b'>

/** Width of a line that nobody has drawn yet, metres: across the track and the grass beside it. */
const FIRST_WIDTH_M = 24

/** Steps that can be taken back. */
const HISTORY = 100

/**
 * The lines of a layout while they are edited: what they are, where along the trace, undo, and whether they differ from
 * what is stored. Sector lines are always numbered in driving order.
 */
export function useLineEditor(layout: Ref<Layout>, trace: Ref<FlatTrace | null>) {
  const lines = ref<DraftLine[]>(layout.value.lines.map(draftOf))
  const measures = useLineMeasures(lines, trace)
  const stored = ref(written(lines.value))
  const history = shallowRef<DraftLine[][]>([])
  const selected = ref<string | null>(null)

  function commit(next: DraftLine[]) {
    history.value = [...history.value.slice(1 - HISTORY), lines.value]
    lines.value = measures.inOrder(next)
    if (!next.some(line => line.key === selected.value)) selected.value = null
  }

  function undo() {
    const before = history.value.at(-1)
    if (!before) return
    history.value = history.value.slice(0, -1)
    lines.value = before
    if (!before.some(line => line.key === selected.value)) selected.value = null
  }

  /** Take lines as they are stored: after saving, or in place of one's own. */
  function takeStored(from: readonly SavedLine[]) {
    lines.value = from.map(draftOf)
    stored.value = written(lines.value)
    history.value = []
    selected.value = null
  }

  return {
    lines, selected, undo, takeStored,
    shown: measures.shown,
    loop: measures.loop,
    dirty: computed(() => written(lines.value) !== stored.value),
    canUndo: computed(() => history.value.length > 0),
    hasStart: computed(() => measures.start.value !== null),
    ...lineEdits(lines, trace, measures, commit, selected),
  }
}

/** Everything that changes lines, each as one step that can be undone. */
function lineEdits(
  lines: Ref<DraftLine[]>, trace: Ref<FlatTrace | null>, measures: ReturnType<typeof useLineMeasures>,
  commit: (next: DraftLine[]) => void, selected: Ref<string | null>,
) {
  const { plane, flat, start, loop, shown } = measures
  const globe = (line: FlatLine): Ends => globeLine(plane.value, line)
  let made = 0

  /** The first line of a layout is its start and finish line, every other one ends a sector. */
  function add(ends: Ends) {
    const key = `new-${++made}`
    commit([...lines.value, { key, kind: start.value ? 'sector' : 'start_finish', ordinal: lines.value.length, ...ends }])
    selected.value = key
  }

  /** Add a line square to the trace, in the middle of the longest sector so far. */
  function addSquare() {
    if (!trace.value || !loop.value) return
    const atM = stationForNext(shown.value.map(line => line.stationM ?? 0), loop.value.lengthM)
    add(globe(lineAt(trace.value, loop.value, atM, FIRST_WIDTH_M)))
  }

  function replace(key: string, { a, b }: Ends) {
    commit(lines.value.map(line => line.key === key ? { ...line, a, b } : line))
  }

  function reshape(key: string, change: (line: FlatLine) => FlatLine) {
    const line = lines.value.find(one => one.key === key)
    if (line) replace(key, globe(change(flat(line))))
  }

  /** Put a line square to the trace at a station of the loop as it is now. */
  function moveTo(key: string, stationM: number) {
    if (!trace.value || !loop.value) return
    const { lengthM, closed } = loop.value
    const atM = closed ? ((stationM % lengthM) + lengthM) % lengthM : Math.min(lengthM, Math.max(0, stationM))
    reshape(key, line => lineAt(trace.value!, loop.value!, atM, lineWidthM(line)))
  }

  return {
    add, addSquare, replace, moveTo,
    remove: (key: string) => commit(lines.value.filter(line => line.key !== key)),
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
