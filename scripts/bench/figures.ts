import process from 'node:process'
import { quantileSorted } from 'simple-statistics'

export interface Figure {
  group: string
  figure: string
  value: number
  unit: string
  /** What the value is to be held against, in words. */
  baseline: string
}

/** One figure as a line of JSON on standard output. */
export function tell(figure: Figure): void {
  process.stdout.write(`${JSON.stringify(figure)}\n`)
}

/** A value at the precision that means something. */
export function rounded(value: number, digits = 1): number {
  return Number(value.toFixed(digits))
}

/** 99th percentile (R type 2). */
export function percentile99(values: readonly number[]): number {
  return quantileSorted([...values].sort((a, b) => a - b), 0.99)
}

/** @throws when a setting of the measurement is missing */
export function needed(name: string): string {
  const value = process.env[name]
  if (!value) throw new Error(`${name} is not set: run npm run --silent bench`)
  return value
}
