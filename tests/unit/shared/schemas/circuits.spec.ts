import { describe, expect, it } from 'vitest'
import { timingLineSchema } from '../../../../shared/schemas/circuits'

const line = { kind: 'start_finish', ordinal: 0, a: { latitudeDeg: 54.4019, longitudeDeg: -2.913 }, b: { latitudeDeg: 54.4021, longitudeDeg: -2.913 } }
const faultsOf = (value: unknown) =>
  timingLineSchema.safeParse(value).error?.issues.map(({ path, message }) => [path.join('.'), message]) ?? []

describe('a timing line', () => {
  it('with both ends on earth is taken', () => {
    expect(faultsOf(line)).toEqual([])
  })

  it.each([90.001, -90.001, 2 ** 53, -1e308])('at %s degrees of latitude is refused with the field and the range', (latitudeDeg) => {
    expect(faultsOf({ ...line, a: { ...line.a, latitudeDeg } })).toEqual([['a.latitudeDeg', 'between \u221290° and 90°']])
  })

  it.each([180.001, -1e21])('at %s degrees of longitude likewise', (longitudeDeg) => {
    expect(faultsOf({ ...line, b: { ...line.b, longitudeDeg } })).toEqual([['b.longitudeDeg', 'between \u2212180° and 180°']])
  })

  it('of no length, or longer than any track is wide, is refused', () => {
    expect(faultsOf({ ...line, b: line.a })).toEqual([['b', expect.stringMatching(/same point/)]])
    expect(faultsOf({ ...line, b: { latitudeDeg: 54.5, longitudeDeg: -2.913 } })).toEqual([['b', expect.stringMatching(/at most 1000 m/)]])
  })
})
