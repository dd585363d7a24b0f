/** Room around the plot of every trace, px: the cursor lies over all of them by these. */
export const TRACE_GRID = { left: 46, right: 16, top: 22, bottom: 26 } as const

/** Height of the two sizes of a trace, px; the same before and after the chart is there. */
export const TRACE_HEIGHT = { tall: 268, low: 168 } as const

/** Width of an A4 page between its margins, px of CSS: 210 mm less 14 mm on both sides, at 96 px an inch. */
export const PAPER_WIDTH = 688

/** Height of the two sizes on paper, px; the chart's style of print holds the same. */
export const TRACE_PAPER_HEIGHT = { tall: 208, low: 132 } as const

/** One line of a trace, in the units of its axes. */
export interface TraceLine {
  points: [number, number | null][]
  /** A CSS colour, as a token. */
  colour: string
  dashed?: boolean
  width?: number
  /** Colour of the area between the line and zero. */
  wash?: string
}

/** An upright over a trace: where a braking begins, in the unit of the axis. */
export interface Upright { at: number, dashed: boolean, label?: string }

/** Place of a share of the plot's width, as a CSS length. */
export function traceLeft(share: number): string {
  return `calc(${TRACE_GRID.left}px + (100% - ${TRACE_GRID.left + TRACE_GRID.right}px) * ${share.toFixed(5)})`
}

/** Share of the plot's width at a place on the screen, 0 to 1. */
export function traceShare(clientX: number, box: { left: number, width: number }): number {
  const width = box.width - TRACE_GRID.left - TRACE_GRID.right
  return Math.min(1, Math.max(0, (clientX - box.left - TRACE_GRID.left) / width))
}
