import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'

const css = readFileSync(new URL('../../../assets/css/tokens.css', import.meta.url), 'utf8').replace(/\/\*[\s\S]*?\*\//g, '')

type Tokens = Record<string, string>

/** The custom properties of the rule that stands behind a text of the style sheet. */
function tokensAfter(text: string): Tokens {
  const from = css.indexOf(text)
  if (from < 0) throw new Error(`no ${text} in tokens.css`)
  const body = css.slice(css.indexOf('{', from) + 1, css.indexOf('}', from))
  return declared(body)
}

function declared(body: string): Tokens {
  const found = body.matchAll(/(--[\w-]+|color-scheme):\s*([^;]+);/g)
  return Object.fromEntries([...found].map(match => [match[1]!, match[2]!.trim()]))
}

const PAPER = tokensAfter(':root, [data-sheet] {')
const DARK = tokensAfter('[data-sheet="dark"] {')
const SHEETS = { paper: PAPER, dark: { ...PAPER, ...DARK } }

type Rgb = [number, number, number]

function colour(tokens: Tokens, name: string): Rgb {
  const value = tokens[name] ?? ''
  const other = /^var\((.*)\)$/.exec(value)
  if (other) return colour(tokens, other[1]!)
  const hex = /^#([0-9a-f]{6})$/i.exec(value)?.[1]
  if (!hex) throw new Error(`${name} is no colour: ${value}`)
  return [0, 2, 4].map(i => Number.parseInt(hex.slice(i, i + 2), 16)) as Rgb
}

/** Contrast of two colours, 1 to 21. WCAG 2.2, definitions of relative luminance and of contrast ratio. */
function contrast(one: Rgb, other: Rgb): number {
  const luminance = (rgb: Rgb) => {
    const [r, g, b] = rgb.map(value => value / 255)
      .map(c => c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4) as Rgb
    return 0.2126 * r + 0.7152 * g + 0.0722 * b
  }
  const [light, dark] = [luminance(one), luminance(other)].sort((a, b) => b - a) as [number, number]
  return (light + 0.05) / (dark + 0.05)
}

/** A colour laid over another one with some opacity, as color-mix with transparent does. */
function over(top: Rgb, below: Rgb, alpha: number): Rgb {
  return top.map((value, i) => value * alpha + below[i]! * (1 - alpha)) as Rgb
}

describe('the formula', () => {
  it('gives the extremes that WCAG names, and a published pair', () => {
    expect(contrast([0, 0, 0], [255, 255, 255])).toBeCloseTo(21, 10)
    // #767676 on white is the well-known lightest grey that passes 4.5 : 1 (from memory).
    expect(contrast([0x76, 0x76, 0x76], [255, 255, 255])).toBeCloseTo(4.54, 2)
    expect(contrast([1, 2, 3], [1, 2, 3])).toBe(1)
  })
})

describe.each(Object.entries(SHEETS))('the sheet "%s"', (_name, tokens) => {
  const of = (name: string) => colour(tokens, name)
  const marked = over(of('--mark'), of('--paper'), Number(tokens['--mark-alpha']))
  const glowing = over(of('--mark'), of('--paper'), Number(tokens['--mark-glow']))

  // WCAG 2.2, 1.4.3: text 4.5 : 1
  it.each(['--ink', '--ink-2'])('%s can be read on paper, in boxes and under the highlighter', (ink) => {
    expect(contrast(of(ink), of('--paper'))).toBeGreaterThanOrEqual(4.5)
    expect(contrast(of(ink), of('--paper-2'))).toBeGreaterThanOrEqual(4.5)
    expect(contrast(of(ink), marked)).toBeGreaterThanOrEqual(4.5)
  })

  it('the figure on the coach’s flag and the sign in the caution can be read', () => {
    expect(contrast(of('--on-coach'), of('--coach'))).toBeGreaterThanOrEqual(4.5)
    // The sign is black on both sheets.
    expect(contrast([0, 0, 0], of('--caution'))).toBeGreaterThanOrEqual(4.5)
  })

  // WCAG 2.2, 1.4.11: graphics and edges of controls 3 : 1
  it.each(['--lap', '--ref', '--lost', '--gain', '--coach', '--rule-2'])('%s stands out from paper', (mark) => {
    expect(contrast(of(mark), of('--paper'))).toBeGreaterThanOrEqual(3)
  })

  it('edges of boxes stand out from what is in them, and lines from the highlighter under them', () => {
    expect(contrast(of('--rule-2'), of('--paper-2'))).toBeGreaterThanOrEqual(3)
    expect(contrast(of('--ink'), glowing)).toBeGreaterThanOrEqual(3)
    expect(contrast(of('--lap'), of('--ref'))).toBeGreaterThanOrEqual(1.5)
  })

  it('graph paper stays behind what is drawn on it', () => {
    for (const line of ['--grid', '--grid-2']) {
      expect(contrast(of(line), of('--paper'))).toBeLessThan(contrast(of('--ref'), of('--paper')))
      expect(contrast(of('--lost'), of(line))).toBeGreaterThanOrEqual(2)
    }
  })
})

describe('the dark sheet', () => {
  it('is the same whether it was chosen or the device asked for it', () => {
    const device = css.slice(css.indexOf('(prefers-color-scheme: dark)'))
    const body = device.slice(device.indexOf('[data-sheet="device"]'))
    expect(Object.keys(DARK).length).toBeGreaterThan(8)
    expect(declared(body.slice(0, body.indexOf('}')))).toEqual(DARK)
  })

  it('tells the browser that it is dark, and never reaches paper', () => {
    expect([PAPER['color-scheme'], DARK['color-scheme']]).toEqual(['light', 'dark'])
    const queries = [...css.matchAll(/@media ([^{]+)\{\s*\[data-sheet=/g)].map(match => match[1]!)
    expect(queries).toHaveLength(2)
    for (const query of queries) expect(query).toMatch(/^screen/)
    expect(tokensAfter('@media print {\n  :root')['--ink']).toBe('#000')
  })
})
