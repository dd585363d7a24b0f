import { describe, expect, it } from 'vitest'
import { fail, sentenceOf } from '../../../../scripts/lib/say.mjs'

const failure = (fields: object) => Object.assign(new Error('ENOENT: words of the system\n  and more'), fields)

describe('sentenceOf', () => {
  it('gives a sentence that was meant for the person as it is', () => {
    try {
      fail('The lights are off: switch them on.')
    }
    catch (error) {
      expect(sentenceOf(error)).toBe('The lights are off: switch them on.')
    }
    expect.assertions(1)
  })

  it.each([
    [{ code: 'ENOSPC', path: '/x/y' }, /disk is full.*\/x\/y.*free about 2 GB/],
    [{ code: 'EACCES', path: '/x/y' }, /may not use \/x\/y.*chown/],
    [{ code: 'EROFS', path: '/x/y' }, /\/x\/y is read-only/],
    [{}, /unexpected.*words of the system/],
  ])('makes one line of %o', (fields, words) => {
    const sentence = sentenceOf(failure(fields))
    expect(sentence).toMatch(words)
    expect(sentence).not.toContain('\n')
  })
})
