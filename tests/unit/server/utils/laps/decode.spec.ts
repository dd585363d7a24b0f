import { describe, expect, it } from 'vitest'
import { createTranscoder, detectEncoding, innerEncoding } from '../../../../../server/utils/laps/decode'
import { latin1, refusal, utf16, utf8 } from '../../../../support/log-text'

describe('detectEncoding', () => {
  it('knows the byte order marks of UTF-16 (RFC 2781, 3.2) and the rest by validity as UTF-8 (RFC 3629)', () => {
    expect(detectEncoding(utf16('a,b', 'le'), true)).toBe('utf-16le')
    expect(detectEncoding(utf16('a,b', 'be'), true)).toBe('utf-16be')
    expect(detectEncoding(utf8('a,b'), true)).toBe('utf-8')
    expect(detectEncoding(utf8('\uFEFFa,b'), true)).toBe('utf-8')
    expect(detectEncoding(utf8('temp °C'), true)).toBe('utf-8')
    expect(detectEncoding(latin1('temp °C'), true)).toBe('latin1')
  })

  it('lets the head end within a character unless it is the whole file', () => {
    const cut = utf8('temp °').subarray(0, -1)
    expect(detectEncoding(cut, false)).toBe('utf-8')
    expect(detectEncoding(cut, true)).toBe('latin1')
  })

  // Signatures: PNG specification 5.2; JFIF 1.02; GIF89a 17; ISO 32000-1 7.5.2; APPNOTE.TXT 4.3.7; RFC 1952 2.3.1.
  it.each([
    [[0x89, 0x50, 0x4E, 0x47, 0x0D, 0x0A, 0x1A, 0x0A], 'PNG'],
    [[0xFF, 0xD8, 0xFF, 0xE0], 'JPEG'],
    [[...utf8('GIF89a')], 'GIF'],
    [[...utf8('%PDF-1.7')], 'PDF'],
    [[0x50, 0x4B, 0x03, 0x04, 0x14], 'zip'],
    [[0x1F, 0x8B, 0x08], 'gzip'],
    [[0x61, 0x2C, 0x00, 0x62], 'NUL'],
    [[0x61, 0x01, 0x02, 0x03, 0x61], 'control characters'],
  ])('refuses %j as %s', (bytes, what) => {
    const { code, message } = refusal(() => detectEncoding(Uint8Array.from(bytes), true))
    expect(code).toBe('not_text')
    expect(message).toContain(what)
  })
})

describe('createTranscoder', () => {
  const text = 'Zeit;Öl °C;𝜔\r\n1;90;2\r\n'

  it.each(['le', 'be'] as const)('makes UTF-8 of UTF-16%s, whatever the chunks', (order) => {
    const bytes = utf16(text, order)
    const transcoder = createTranscoder(`utf-16${order}`)
    const parts = Array.from(bytes, (_, i) => transcoder.push(bytes.subarray(i, i + 1)))
    const whole = Uint8Array.from([...parts, transcoder.end()].flatMap(part => [...part]))
    expect(new TextDecoder().decode(whole)).toBe(text)
  })

  it('passes the others through', () => {
    const bytes = utf8(text)
    expect(createTranscoder('utf-8').push(bytes)).toBe(bytes)
    expect(createTranscoder('latin1').push(bytes)).toBe(bytes)
    expect(innerEncoding('utf-16be')).toBe('utf-8')
    expect(innerEncoding('latin1')).toBe('latin1')
  })
})
