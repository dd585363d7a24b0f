/** A rectangle of a picture, px, y downwards. */
export interface Box { left: number, top: number, right: number, bottom: number }

/** A place where a label may stand, with the room it would take. */
export interface LabelPlace { x: number, y: number, anchor: 'start' | 'middle' | 'end', box: Box }

/** Share of its size by which a figure of the monospaced face is wide; JetBrains Mono is 600 of 1000 units. */
const ADVANCE = 0.6

/** A small square around a point. */
export function around({ x, y }: { x: number, y: number }, halfPx: number): Box {
  return { left: x - halfPx, top: y - halfPx, right: x + halfPx, bottom: y + halfPx }
}

export function overlap(a: Box, b: Box): boolean {
  return a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom
}

/**
 * The first of some places that lies within the picture and on nothing that is there already. When there is none: the
 * first that lies at least on nothing of `taken` and within the picture, then the first on nothing of `taken`, then the
 * first of all.
 * @param places in order of preference, at least one
 * @param avoid  what had better not be covered, such as the line that the labels belong to
 */
export function firstFree<T extends { box: Box }>(
  places: readonly T[], taken: readonly Box[], within?: Box, avoid: readonly Box[] = [],
): T {
  const free = places.filter(place => !taken.some(box => overlap(place.box, box)))
  const clear = free.filter(place => !avoid.some(box => overlap(place.box, box)))
  const inside = ({ box }: T) => within === undefined || (box.left >= within.left && box.right <= within.right
    && box.top >= within.top && box.bottom <= within.bottom)
  return clear.find(inside) ?? free.find(inside) ?? free[0] ?? places[0]!
}

/**
 * Where a line of text stands when it leads away from a point.
 * @param towards unit vector from the point, y downwards
 * @param apartPx free room between the point and the text
 * @param sizePx of the letters
 */
export function labelPlace(
  point: { x: number, y: number }, towards: { x: number, y: number }, text: string, apartPx: number, sizePx = 12,
): LabelPlace {
  const width = text.length * ADVANCE * sizePx
  // Beside the point when the way there is more across than up; above or below it otherwise.
  const aside = Math.abs(towards.x) > 0.6
  const x = point.x + towards.x * apartPx
  const middle = point.y + towards.y * (apartPx + (aside ? 0 : sizePx / 2))
  const left = !aside ? x - width / 2 : towards.x > 0 ? x : x - width
  return {
    x,
    y: middle + sizePx * 0.35,
    anchor: !aside ? 'middle' : towards.x > 0 ? 'start' : 'end',
    box: { left, top: middle - sizePx / 2 - 2, right: left + width, bottom: middle + sizePx / 2 + 2 },
  }
}
