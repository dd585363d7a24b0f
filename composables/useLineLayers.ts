import type * as Leaflet from 'leaflet'
import type { DraftLine } from '#shared/lines'
import type { Box } from '#shared/labels'
import { around, firstFree } from '#shared/labels'
import { lineName } from '#shared/lines'
import type { ShownLine } from './useLineMeasures'

type L = typeof Leaflet
/** What is seen of a line follows what is held of it. */
type Follow = (to: Leaflet.LatLng[]) => void

interface Wishes {
  /** Broad enough for a finger. */
  touch: boolean
  mayEdit: boolean
  /** Some points of the trace: names stand beside it where they can. */
  trace: readonly [number, number][]
  /** Writes a station, m, with its unit. */
  distance: (atM: number) => string
  select: (key: string) => void
  change: (key: string, ends: Pick<DraftLine, 'a' | 'b'>) => void
}

/** Room that the name of a line takes beside it. */
const NAME_PX = 125

const place = (point: DraftLine['a']): [number, number] => [point.latitudeDeg, point.longitudeDeg]
const point = (at: Leaflet.LatLng): DraftLine['a'] => ({ latitudeDeg: at.lat, longitudeDeg: at.lng })

/** The timing lines on the map; the selected one can be dragged by its ends and as a whole. */
export function drawLines(
  L: L, map: Leaflet.Map, lines: readonly ShownLine[], selected: string | null, wishes: Wishes,
): Leaflet.LayerGroup {
  const group = L.layerGroup().addTo(map)
  const centre = middle(lines.flatMap(line => [line.a, line.b]))
  const taken: Box[] = []
  const trace = wishes.trace.map(at => around(map.latLngToContainerPoint(at), 3))
  for (const line of lines) {
    const ends = [place(line.a), place(line.b)]
    const isSelected = line.key === selected
    const stroke = { lineCap: 'butt', interactive: false, pmIgnore: true } as const
    const glow = L.polyline(ends, { ...stroke, color: 'var(--mark)', weight: 22, opacity: 0, className: isSelected ? 'line-glow' : '' }).addTo(group)
    const seen = L.polyline(ends, { ...stroke, color: 'var(--ink)', weight: line.ordinal === 0 ? 6 : 2.5 }).addTo(group)
    const grip = L.polyline(ends, { color: 'var(--ink)', weight: wishes.touch ? 44 : 22, opacity: 0, lineCap: 'butt', className: isSelected ? 'line-grip chosen' : 'line-grip', pmIgnore: false }).addTo(group)
    const follow = (to: Leaflet.LatLng[]) => {
      glow.setLatLngs(to)
      seen.setLatLngs(to)
    }
    const name = `<b>${lineName(line.ordinal)}</b>${line.stationM === null ? '' : `<br>${wishes.distance(line.stationM)}`}`
    const beside = free(map, line, centre, taken, trace)
    L.marker(outer(line, centre), { icon: L.divIcon({ className: '', iconSize: [0, 0] }), interactive: false, keyboard: false, pmIgnore: true })
      .bindTooltip(name, { permanent: true, direction: beside.at, offset: beside.by, className: 'map-word' }).addTo(group)
    grip.on('click', () => wishes.select(line.key))
    if (isSelected && wishes.mayEdit) {
      const apartPx = map.latLngToLayerPoint(ends[0]!).distanceTo(map.latLngToLayerPoint(ends[1]!))
      // Handles for fingers would hide a line that is shorter than they are; its body can still be dragged.
      if (!wishes.touch || apartPx > 76) dragEnds(grip, follow, to => wishes.change(line.key, to))
      dragWhole(L, map, grip, follow, to => wishes.change(line.key, to))
    }
  }
  return group
}

function middle(points: DraftLine['a'][]): DraftLine['a'] {
  const mean = (axis: keyof DraftLine['a']) => points.reduce((sum, one) => sum + one[axis], 0) / (points.length || 1)
  return { latitudeDeg: mean('latitudeDeg'), longitudeDeg: mean('longitudeDeg') }
}

/** Degrees of longitude are shorter than those of latitude. */
function awayDeg(from: DraftLine['a'], to: DraftLine['a']): number {
  const shrink = Math.cos(from.latitudeDeg * Math.PI / 180)
  return Math.hypot(to.latitudeDeg - from.latitudeDeg, (to.longitudeDeg - from.longitudeDeg) * shrink)
}

/** The end of a line that lies on the outer side of the circuit: its name stands there, off the trace. */
function outer(line: DraftLine, centre: DraftLine['a']): [number, number] {
  return place(awayDeg(centre, line.a) > awayDeg(centre, line.b) ? line.a : line.b)
}

/** How far up or down from its line a name is put where it has no room straight beside it, px. */
const ASLANT_PX = 22
const SIDES = ['top', 'bottom', 'left', 'right'] as const

/** The side on which the name of a line covers no other name: the wanted one if it can be. */
function free(
  map: Leaflet.Map, line: DraftLine, centre: DraftLine['a'], taken: Box[], trace: readonly Box[],
): { at: ReturnType<typeof side>, by: [number, number] } {
  const wanted = within(map, outer(line, centre), side(line, centre))
  const { x, y } = map.latLngToContainerPoint(outer(line, centre))
  const [wide, high] = [lineName(line.ordinal).length * 7.4, 34]
  const sides = [wanted, ...SIDES.filter(each => each !== wanted)].map(at => ({ at, by: offset(at) }))
  const aslant = sides.filter(({ at }) => at === 'left' || at === 'right')
    .flatMap(({ at, by: [dx] }) => [-ASLANT_PX, ASLANT_PX].map(dy => ({ at, by: [dx, dy] as [number, number] })))
  const places = [...sides, ...aslant].map(({ at, by }) => {
    const [dx, dy] = by
    const left = x + dx + { top: -wide / 2, bottom: -wide / 2, left: -wide, right: 0 }[at]
    const top = y + dy + { top: -high, bottom: 0, left: -high / 2, right: -high / 2 }[at]
    return { at, by, box: { left, top, right: left + wide, bottom: top + high } }
  })
  const size = map.getSize()
  const found = firstFree(places, taken, { left: 0, top: 0, right: size.x, bottom: size.y }, trace)
  taken.push(found.box)
  return found
}

/** A name that would reach over the edge of the map stands above its line, or towards the middle. */
function within(map: Leaflet.Map, place: [number, number], wanted: ReturnType<typeof side>): ReturnType<typeof side> {
  const { x } = map.latLngToContainerPoint(place)
  const fromEdgePx = { left: x, right: map.getSize().x - x, top: Infinity, bottom: Infinity }[wanted]
  if (fromEdgePx > NAME_PX) return wanted
  if (fromEdgePx > NAME_PX / 2) return 'top'
  return wanted === 'left' ? 'right' : 'left'
}

function side(line: DraftLine, centre: DraftLine['a']): 'top' | 'bottom' | 'left' | 'right' {
  const [latitudeDeg, longitudeDeg] = outer(line, centre)
  const between = middle([line.a, line.b])
  const up = latitudeDeg - between.latitudeDeg
  const right = (longitudeDeg - between.longitudeDeg) * Math.cos(latitudeDeg * Math.PI / 180)
  if (Math.abs(up) > Math.abs(right)) return up > 0 ? 'top' : 'bottom'
  return right > 0 ? 'right' : 'left'
}

/** Room for the handle between the end of the line and its name, px. */
function offset(direction: ReturnType<typeof side>): [number, number] {
  return { top: [0, -10], bottom: [0, 10], left: [-12, 0], right: [12, 0] }[direction] as [number, number]
}

function endsOf(grip: Leaflet.Polyline): Pick<DraftLine, 'a' | 'b'> {
  const [a, b] = grip.getLatLngs() as Leaflet.LatLng[]
  return { a: point(a!), b: point(b!) }
}

/** Handles at both ends, by the drawing library. */
function dragEnds(grip: Leaflet.Polyline, follow: Follow, done: (ends: Pick<DraftLine, 'a' | 'b'>) => void) {
  grip.pm.enable({
    snappable: false,
    hideMiddleMarkers: true,
    preventMarkerRemoval: true,
    addVertexOnClick: false,
    allowSelfIntersection: true,
  })
  grip.on('pm:markerdrag', () => follow(grip.getLatLngs() as Leaflet.LatLng[]))
  grip.on('pm:markerdragend', () => done(endsOf(grip)))
}

/** The body of the line moves all of it, without turning it. The library drags either ends or the whole, never both. */
function dragWhole(L: L, map: Leaflet.Map, grip: Leaflet.Polyline, follow: Follow, done: (ends: Pick<DraftLine, 'a' | 'b'>) => void) {
  const element = grip.getElement() as SVGPathElement | undefined
  if (!element) return
  element.style.touchAction = 'none'
  element.style.cursor = 'move'
  L.DomEvent.on(element as unknown as HTMLElement, 'mousedown touchstart', L.DomEvent.stopPropagation)
  let from: Leaflet.Point | null = null
  let start: Leaflet.Point[] = []
  let moved = false
  element.addEventListener('pointerdown', (event) => {
    event.stopPropagation()
    element.setPointerCapture(event.pointerId)
    from = map.mouseEventToLayerPoint(event)
    start = (grip.getLatLngs() as Leaflet.LatLng[]).map(at => map.latLngToLayerPoint(at))
    moved = false
  })
  element.addEventListener('pointermove', (event) => {
    if (!from) return
    const by = map.mouseEventToLayerPoint(event).subtract(from)
    if (!moved && by.distanceTo(L.point(0, 0)) < 3) return
    if (!moved) grip.pm.disable()
    moved = true
    const to = start.map(at => map.layerPointToLatLng(at.add(by)))
    grip.setLatLngs(to)
    follow(to)
  })
  const stop = () => {
    if (from && moved) done(endsOf(grip))
    from = null
  }
  element.addEventListener('pointerup', stop)
  element.addEventListener('pointercancel', stop)
}

/** Let a person draw a line by its two ends. Returns what stops it. */
export function drawByHand(map: Leaflet.Map, drawn: (ends: Pick<DraftLine, 'a' | 'b'>) => void): () => void {
  const stroke = { color: 'var(--ink)', weight: 2.5 }
  map.pm.setGlobalOptions({ snappable: false })
  map.pm.enableDraw('Line', { snappable: false, tooltips: false, allowSelfIntersection: true, templineStyle: stroke, hintlineStyle: { ...stroke, dashArray: '4 4' } })
  const onStart = (event: { workingLayer: Leaflet.Layer }) => {
    event.workingLayer.on('pm:vertexadded', () => {
      const working = event.workingLayer as Leaflet.Polyline
      if ((working.getLatLngs() as Leaflet.LatLng[]).length < 2) return
      const ends = endsOf(working)
      stop()
      drawn(ends)
    })
  }
  function stop() {
    map.off('pm:drawstart', onStart)
    map.pm.disableDraw()
  }
  map.on('pm:drawstart', onStart)
  // The layer that is being drawn exists already when drawing was enabled above.
  const working = (map.pm.Draw as unknown as { Line: { _layer?: Leaflet.Layer } }).Line._layer
  if (working) onStart({ workingLayer: working })
  return stop
}
