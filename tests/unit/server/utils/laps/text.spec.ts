import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { columnSource, printable } from '../../../../../server/utils/laps/text'

describe('printable', () => {
  it('leaves text as it is, whatever its script', () => {
    expect(printable('Öl vorn (°C) 𝜔 温度', 40)).toBe('Öl vorn (°C) 𝜔 温度')
  })

  it('shows control characters, and line ends and tabs as a space', () => {
    expect(printable('a\u0000b\u001F\u007F\u0085c', 40)).toBe('a?b???c')
    expect(printable('Speed\r\n\t(km/h)', 40)).toBe('Speed (km/h)')
  })

  it('cuts no character in half', () => {
    expect(printable(`${'x'.repeat(39)}😀`, 40).isWellFormed()).toBe(true)
    expect(printable('\uD83D', 40).isWellFormed()).toBe(true)
  })

  it('is stored by PostgreSQL, whatever it was', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary' }), fc.nat(30), (text, most) => {
      const shown = printable(text, most)
      // JSON writes a control character and half a character as an escape, and nothing else but quotes and backslashes.
      expect(JSON.stringify(shown)).not.toMatch(/\\[^"\\]/)
      expect(shown.length).toBeLessThanOrEqual(most)
    }))
  })
})

describe('columnSource', () => {
  it('is the cell without spaces and a byte order mark around it, 200 characters at most', () => {
    expect(columnSource('\uFEFF Speed (km/h)\t')).toBe('Speed (km/h)')
    expect(columnSource('x'.repeat(300))).toHaveLength(200)
  })
})
