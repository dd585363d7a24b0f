import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { cellNumber, decimalMark, isMissing, plainNumber } from '../../../../../server/utils/laps/numbers'
import { utf8 } from '../../../../support/log-text'

function plain(text: string, mark = '.'): number {
  const bytes = utf8(text)
  return plainNumber(bytes, 0, bytes.length, mark.charCodeAt(0))
}

describe('plainNumber', () => {
  it('gives the same float64 as Number for every decimal that it reads', () => {
    const decimal = fc.tuple(fc.boolean(), fc.stringMatching(/^\d{0,12}$/), fc.stringMatching(/^\d{0,12}$/))
      .map(([negative, whole, fraction]) => `${negative ? '-' : ''}${whole}${fraction === '' ? '' : `.${fraction}`}`)
    let read = 0
    fc.assert(fc.property(decimal, (text) => {
      const value = plain(text)
      if (Number.isNaN(value)) return
      read++
      expect(Object.is(value, Number(text))).toBe(true)
    }), { numRuns: 2000 })
    // The property would hold of a function that reads nothing.
    expect(read).toBeGreaterThan(1000)
  })

  it('is correctly rounded next to the limit of exact integers', () => {
    expect(plain('9007199254740991')).toBe(9007199254740991)
    expect(plain('.9007199254740991')).toBe(0.9007199254740991)
    // Adding the digit in two steps would pass 2^53 on the way and round.
    const sixteen = fc.bigInt({ min: 2n ** 53n - 1000n, max: 2n ** 53n - 1n })
    fc.assert(fc.property(sixteen, (digits) => {
      expect(plain(String(digits))).toBe(Number(digits))
    }))
    // 2^53 and more, and 17 digits, are left to the exact reader.
    expect(plain('9007199254740992')).toBeNaN()
    expect(plain('0.12345678901234567')).toBeNaN()
  })

  it.each([['7', 7], ['-0', -0], ['.5', 0.5], ['5.', 5], [' 1.25 ', 1.25], ['-12.50', -12.5]])('reads %j', (text, value) => {
    expect(Object.is(plain(text), value)).toBe(true)
  })

  it.each(['', '-', '.', '1e5', '+1', '1,5', '1.2.3', '1 2', 'abc', '0x10', '12:30'])('leaves %j to the exact reader', (text) => {
    expect(plain(text)).toBeNaN()
  })

  it('reads a decimal comma where the file has one', () => {
    expect(plain('-1,75', ',')).toBe(-1.75)
    expect(plain('1.75', ',')).toBeNaN()
  })
})

describe('cellNumber', () => {
  it('reads back every float64 that JavaScript writes', () => {
    fc.assert(fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
      // String(-0) is '0'.
      expect(cellNumber(String(value), '.')).toBe(value === 0 ? 0 : value)
    }))
  })

  it.each(['1e5', '+1.5', '-2.5E-3', '0.12345678901234567', '9007199254740993', '1e-400'])('reads %j as Number does', (text) => {
    expect(cellNumber(text, '.')).toBe(Number(text))
  })

  it.each(['', ' ', '-', '--', 'NaN', 'n/a', 'N/A', 'null'])('takes %j for missing', (text) => {
    expect(cellNumber(text, '.')).toBeNaN()
    expect(isMissing(text)).toBe(true)
  })

  it.each(['abc', '1,5', '0x10', 'Infinity', '1e999', '12:30', '1 2', '1_000'])('does not take %j for a number', (text) => {
    expect(cellNumber(text, '.')).toBeUndefined()
    expect(isMissing(text)).toBe(false)
  })
})

describe('decimalMark', () => {
  it('is a point wherever commas cut the cells or any value has a point', () => {
    expect(decimalMark(['1,5'], ',')).toBe('.')
    expect(decimalMark(['1,234', '5.5'], ';')).toBe('.')
    expect(decimalMark(['12', 'text'], ';')).toBe('.')
  })

  it('is a comma where values have commas only', () => {
    expect(decimalMark(['12', '-1,5'], ';')).toBe(',')
  })
})
