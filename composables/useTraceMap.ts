import type * as Leaflet from 'leaflet'
import type { FlatTrace, LogTrace, Loop } from '#shared/lines'
import { headingAtWay, pointAtWay, roundLengthM } from '#shared/lines'
import type { Plane } from '#shared/plane'
import { pointToPlane, toDegrees } from '#shared/plane'

type L = typeof Leaflet
type LatLng = [number, number]

const ARROWS = 5
/** Wider maps have no graph paper. */
const WIDEST_DEG = 5

/** The trace of a log on a map: every passage pale, the best lap strong, the way driven, and where the log starts. */
export function drawTrace(L: L, map: Leaflet.Map, raw: LogTrace, trace: FlatTrace, loop: Loop): Leaflet.LayerGroup {
  const group = L.layerGroup().addTo(map)
  const place = (i: number): LatLng => [raw.latitudeDeg[i]!, raw.longitudeDeg[i]!]
  const thin = { interactive: false, pmIgnore: true, smoothFactor: 0.5 }
  L.polyline(pieces(raw, place), { ...thin, color: 'var(--rule-2)', weight: 1, opacity: 0.8 }).addTo(group)
  const best: LatLng[] = []
  for (let i = 0; i < trace.wayM.length; i++) {
    if (trace.wayM[i]! >= loop.fromM && trace.wayM[i]! <= loop.fromM + loop.lengthM) best.push(place(i))
  }
  if (loop.closed) L.polyline(best, { ...thin, color: 'var(--ink)', weight: 1.75 }).addTo(group)
  for (let k = 0; k < ARROWS; k++) {
    const atM = loop.fromM + loop.lengthM * (k + 0.5) / ARROWS
    const { xM, yM } = pointAtWay(trace, atM)
    const { latitudeDeg, longitudeDeg } = toDegrees(trace.plane, xM, yM)
    const turn = -headingAtWay(trace, atM) * 180 / Math.PI
    const html = `<svg viewBox="-9 -9 18 18" width="18" height="18" aria-hidden="true"><path transform="rotate(${turn.toFixed(1)})" d="M-4 -6L5 0L-4 6" fill="none" stroke="var(--ink)" stroke-width="1.75"/></svg>`
    L.marker([latitudeDeg, longitudeDeg], { icon: L.divIcon({ className: 'way-arrow', html, iconSize: [18, 18] }), interactive: false, keyboard: false, pmIgnore: true }).addTo(group)
  }
  L.circleMarker(place(0), { radius: 4, color: 'var(--ink)', weight: 1.5, fillColor: 'var(--paper)', fillOpacity: 1, interactive: false, pmIgnore: true })
    .bindTooltip('log starts', { permanent: true, direction: 'auto', className: 'map-word', offset: [6, 0] }).addTo(group)
  return group
}

/** The trace in pieces that do not reach over its gaps. */
function pieces(raw: LogTrace, place: (i: number) => LatLng): LatLng[][] {
  const out: LatLng[][] = [[]]
  for (let i = 0; i < raw.timeS.length; i++) {
    const before = raw.timeS[i - 1] ?? raw.timeS[i]!
    if (raw.gaps.some(gap => gap.fromS < raw.timeS[i]! && gap.toS > before)) out.push([])
    out.at(-1)!.push(place(i))
  }
  return out
}

/**
 * Graph paper under the map: squares of a round length, redrawn as the map moves.
 * @param planeNow the plane in which the squares are square
 * @param unitM length of the unit in which the sides are to be round, metres
 * @param told is told the side of the squares, metres; 0 where there are none
 */
export function drawGraticule(
  L: L, map: Leaflet.Map, planeNow: () => Plane, unitM: number, told: (sideM: number) => void,
): Leaflet.LayerGroup {
  const pane = map.getPane('graticule') ?? map.createPane('graticule')
  pane.style.zIndex = '150'
  const group = L.layerGroup().addTo(map)
  const renderer = L.svg({ pane: 'graticule', padding: 0.2 })

  function draw() {
    group.clearLayers()
    const plane = planeNow()
    const bounds = map.getBounds().pad(0.15)
    // A map of half the earth, before there is a trace: no plane has squares there.
    if (bounds.getEast() - bounds.getWest() > WIDEST_DEG) {
      told(0)
      return
    }
    const low = pointToPlane(plane, { latitudeDeg: bounds.getSouth(), longitudeDeg: bounds.getWest() })
    const high = pointToPlane(plane, { latitudeDeg: bounds.getNorth(), longitudeDeg: bounds.getEast() })
    const sideM = roundLengthM(Math.max(10, (high.xM - low.xM) / 7) / unitM) * unitM
    const line = (x1: number, y1: number, x2: number, y2: number) => {
      const ends = [toDegrees(plane, x1, y1), toDegrees(plane, x2, y2)]
        .map(({ latitudeDeg, longitudeDeg }): LatLng => [latitudeDeg, longitudeDeg])
      if (ends.flat().some(Number.isNaN)) return
      L.polyline(ends, { renderer, pane: 'graticule', color: 'var(--grid)', weight: 1, interactive: false, pmIgnore: true }).addTo(group)
    }
    for (let x = Math.ceil(low.xM / sideM) * sideM; x <= high.xM; x += sideM) line(x, low.yM, x, high.yM)
    for (let y = Math.ceil(low.yM / sideM) * sideM; y <= high.yM; y += sideM) line(low.xM, y, high.xM, y)
    told(sideM)
  }
  map.on('moveend zoomend resize', draw)
  draw()
  return group
}
