import { roundLengthM } from './lines'

/** A track outline fitted into a picture of a given width, north up. */
export interface Outline {
  width: number
  height: number
  /** SVG path through every few metres of it. */
  path: string
  /** Place of a station index in the picture. */
  at: (index: number) => { x: number, y: number }
  /** A short stroke across the track at an index. */
  across: (index: number, half: number) => { x1: number, y1: number, x2: number, y2: number }
  /** A round length and its size in the picture, for the scale bar. */
  bar: { lengthM: number, size: number }
}

/**
 * Fit a path into a picture: same scale both ways, north up.
 * @param pathM metres east and north, at least two points
 * @param width of the picture; its height follows, at most `maxHeight`
 * @param unitM length of the unit in which the scale bar is to be round, metres
 */
export function fitOutline(
  pathM: { x: readonly number[], y: readonly number[] }, width: number, maxHeight: number, padding: number,
  unitM = 1,
): Outline {
  let [left, right, bottom, top] = [Infinity, -Infinity, Infinity, -Infinity]
  for (const [i, x] of pathM.x.entries()) {
    const y = pathM.y[i]!
    left = Math.min(left, x)
    right = Math.max(right, x)
    bottom = Math.min(bottom, y)
    top = Math.max(top, y)
  }
  const wideM = Math.max(right - left, 1)
  const highM = Math.max(top - bottom, 1)
  const scale = Math.min((width - 2 * padding) / wideM, (maxHeight - 2 * padding) / highM)
  const height = highM * scale + 2 * padding
  const slack = (width - wideM * scale) / 2
  const at = (index: number) => ({
    x: slack + (pathM.x[index]! - left) * scale,
    y: padding + (top - pathM.y[index]!) * scale,
  })
  const across = (index: number, half: number) => {
    const before = at(Math.max(0, index - 3))
    const after = at(Math.min(pathM.x.length - 1, index + 3))
    const length = Math.hypot(after.x - before.x, after.y - before.y) || 1
    const here = at(index)
    const dx = -(after.y - before.y) / length * half
    const dy = (after.x - before.x) / length * half
    return { x1: here.x - dx, y1: here.y - dy, x2: here.x + dx, y2: here.y + dy }
  }
  const lengthM = roundLengthM(wideM / 4 / unitM) * unitM
  return { width, height, path: outlinePath(pathM.x.length, at), at, across, bar: { lengthM, size: lengthM * scale } }
}

/** About 800 points are plenty for a picture of a track. */
function outlinePath(n: number, at: Outline['at']): string {
  const stride = Math.max(1, Math.floor(n / 800))
  const points: string[] = []
  for (let i = 0; i < n; i += stride) {
    const { x, y } = at(i)
    points.push(`${x.toFixed(1)} ${y.toFixed(1)}`)
  }
  const end = at(n - 1)
  return `M${points.join('L')}L${end.x.toFixed(1)} ${end.y.toFixed(1)}`
}
