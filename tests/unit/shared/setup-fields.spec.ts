import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { Sheet } from '../../../shared/schemas/setups'
import { CORNERS, emptySheet, sheetSchema } from '../../../shared/schemas/setups'
import {
  countSameSettings, countSettings, otherSide, SETUP_FIELDS, settingOf, sheetDifferences,
} from '../../../shared/setup-fields'

/** An empty sheet with some of its fields filled in. */
function sheet(change: (sheet: Sheet) => void): Sheet {
  const made = emptySheet()
  change(made)
  return made
}

function put(made: object, path: string, value: unknown) {
  const keys = path.split('.')
  const last = keys.pop() as string
  const held = keys.reduce((inner, key) => inner[key] as Record<string, unknown>, made as Record<string, unknown>)
  held[last] = value
}

/** Paths of all leaves of an object. */
function leaves(value: unknown, path = ''): string[] {
  if (typeof value !== 'object' || value === null) return [path]
  return Object.entries(value).flatMap(([key, inner]) => leaves(inner, path ? `${path}.${key}` : key))
}

describe('SETUP_FIELDS', () => {
  it('names every setting of the schema once, and nothing else', () => {
    const expected = leaves(emptySheet()).filter(path => path !== 'notes' && path !== 'clicksFrom')
    expect(SETUP_FIELDS.map(field => field.path).sort()).toEqual(expected.sort())
  })

  it('has no two fields of the same full name', () => {
    expect(new Set(SETUP_FIELDS.map(field => field.fullLabel)).size).toBe(SETUP_FIELDS.length)
  })

  it('allows a minus exactly where the schema does', () => {
    for (const field of SETUP_FIELDS.filter(one => one.kind === 'number')) {
      const made = emptySheet()
      put(made, field.path, -0.5)
      expect([field.path, sheetSchema.safeParse(made).success]).toEqual([field.path, field.signed])
    }
  })
})

describe('settingOf', () => {
  it('shows pressures in bar without the dust of the division', () => {
    const made = sheet(made => put(made, 'corners.fl.coldKpa', 210.00000000000003))
    const field = SETUP_FIELDS.find(one => one.path === 'corners.fl.coldKpa')!
    expect(settingOf(made, field)).toBe(2.1)
  })

  it('makes no difference between an empty word and none', () => {
    expect(settingOf(emptySheet(), { path: 'car.frontPads', scale: 1 })).toBeNull()
  })

  it('keeps zero apart from nothing', () => {
    expect(settingOf(sheet(made => put(made, 'car.ballastKg', 0)), { path: 'car.ballastKg', scale: 1 })).toBe(0)
  })
})

describe('sheetDifferences', () => {
  it('finds none between equal sheets, whatever their notes', () => {
    expect(sheetDifferences(emptySheet(), sheet(made => put(made, 'notes', 'as it left the last day')))).toEqual([])
  })

  it('makes one line of an axle whose sides changed alike', () => {
    const spring = (npmm: number) => sheet(({ corners }) => {
      corners.rl.springNpmm = npmm
      corners.rr.springNpmm = npmm
    })
    expect(sheetDifferences(spring(28), spring(32))).toEqual([{ label: 'Rear spring', unit: 'N/mm', a: 28, b: 32 }])
  })

  it('keeps sides apart that came to the same figure from different ones', () => {
    const a = sheet(({ corners }) => {
      corners.fl.camberDeg = -3.1
      corners.fr.camberDeg = -3.3
    })
    const b = sheet(({ corners }) => {
      corners.fl.camberDeg = -3
      corners.fr.camberDeg = -3
    })
    expect(sheetDifferences(a, b)).toEqual([
      { label: 'Front left camber', unit: '°', a: -3.1, b: -3 },
      { label: 'Front right camber', unit: '°', a: -3.3, b: -3 },
    ])
  })

  it('names the side where only one changed', () => {
    const b = sheet(made => put(made, 'corners.fr.coldKpa', 180))
    const difference = { label: 'Front right cold pressure', unit: 'bar', a: null, b: 1.8 }
    expect(sheetDifferences(emptySheet(), b)).toEqual([difference])
  })

  it('lists axles, the whole car and the end from which clicks are counted', () => {
    const b = sheet((made) => {
      made.axles.rear.barMm = 19
      made.car.frontPads = 'track 2'
      made.clicksFrom = 'full soft'
    })
    expect(sheetDifferences(emptySheet(), b)).toEqual([
      { label: 'Rear bar', unit: 'mm', a: null, b: 19 },
      { label: 'Front pads', unit: '', a: null, b: 'track 2' },
      { label: 'Clicks counted from', unit: '', a: 'full stiff', b: 'full soft' },
    ])
  })

  const figure = fc.option(fc.integer({ min: 60, max: 75 }), { nil: null })
  const figures = fc.record({ fl: figure, fr: figure, rl: figure, rr: figure, bias: figure })
  const anySheet = figures.map(made => sheet((one) => {
    for (const corner of CORNERS) one.corners[corner].springNpmm = made[corner]
    one.car.brakeBiasPct = made.bias
  }))

  it('says the same backwards, and does not change what it is given', () => {
    fc.assert(fc.property(anySheet, anySheet, (a, b) => {
      const before = JSON.stringify([a, b])
      const turned = sheetDifferences(b, a).map(one => ({ ...one, a: one.b, b: one.a }))
      expect(sheetDifferences(a, b)).toEqual(turned)
      expect(JSON.stringify([a, b])).toBe(before)
    }))
  })

  it('counts with the same settings to all that are filled in on either sheet', () => {
    fc.assert(fc.property(anySheet, anySheet, (a, b) => {
      const filled = SETUP_FIELDS.filter(field => settingOf(a, field) !== null || settingOf(b, field) !== null).length
      // A line that speaks of both sides of an axle ("Front spring") is two settings.
      const lines = sheetDifferences(a, b).reduce((sum, one) => sum + (/^(Front|Rear) spring$/.test(one.label) ? 2 : 1), 0)
      expect(countSameSettings(a, b) + lines).toBe(filled)
    }))
  })
})

describe('countSettings', () => {
  it('counts what is filled in', () => {
    expect(countSettings(emptySheet())).toBe(0)
    expect(countSettings(sheet((made) => {
      made.car.rearPads = 'road'
      made.corners.fl.toeMm = 0
    }))).toBe(2)
  })
})

describe('otherSide', () => {
  it.each([
    ['corners.fl.toeMm', 'corners.fr.toeMm'],
    ['corners.rr.toeMm', 'corners.rl.toeMm'],
    ['car.wingDeg', 'car.wingDeg'],
  ])('of %s is %s', (path, other) => {
    expect(otherSide(path)).toBe(other)
  })
})
