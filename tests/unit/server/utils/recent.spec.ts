import { describe, expect, it, vi } from 'vitest'
import { keepRecent } from '../../../../server/utils/recent'

describe('keepRecent', () => {
  it('works an answer out once, also for two who ask at one moment', async () => {
    const recent = keepRecent<number>(2)
    const make = vi.fn(async () => 7)
    expect(await Promise.all([recent('a', make), recent('a', make), recent('a', make)])).toEqual([7, 7, 7])
    expect(make).toHaveBeenCalledOnce()
  })

  it('lets go of what was asked for longest ago', async () => {
    const recent = keepRecent<string>(2)
    const made: string[] = []
    const ask = (key: string) => recent(key, async () => {
      made.push(key)
      return key
    })
    for (const key of ['a', 'b', 'a', 'c', 'a', 'b']) expect(await ask(key)).toBe(key)
    expect(made).toEqual(['a', 'b', 'c', 'b'])
  })

  it('does not keep a failure', async () => {
    const recent = keepRecent<number>(2)
    await expect(recent('a', async () => Promise.reject(new Error('away')))).rejects.toThrow('away')
    expect(await recent('a', async () => 1)).toBe(1)
  })
})
