import { gunzipSync } from 'node:zlib'
import { describe, expect, it } from 'vitest'
import { gzip, isGzip } from '../../../shared/gzip'

const TEXT = 'time_s,lat,lon\n'.concat('0.04,54.401872,-2.918340\n'.repeat(20_000))

describe('gzip', () => {
  it('gives bytes that zlib reads back to the same text, much smaller', async () => {
    const shares: number[] = []
    const packed = await gzip(new Blob([TEXT]), share => shares.push(share), new AbortController().signal)
    expect(gunzipSync(Buffer.from(await packed.arrayBuffer())).toString()).toBe(TEXT)
    // Twenty thousand equal lines: a tenth is far above what deflate makes of them.
    expect(packed.size).toBeLessThan(TEXT.length / 10)
    expect(shares).toEqual([...shares].sort((a, b) => a - b))
    expect(shares.at(-1)).toBe(1)
  })

  it('stops when it is told to', async () => {
    const stop = new AbortController()
    stop.abort()
    await expect(gzip(new Blob([TEXT]), () => {}, stop.signal)).rejects.toMatchObject({ name: 'AbortError' })
  })

  it('is recognised by its first bytes and nothing else', async () => {
    expect(await isGzip(await gzip(new Blob([TEXT]), () => {}, new AbortController().signal))).toBe(true)
    expect(await isGzip(new Blob([TEXT]))).toBe(false)
    expect(await isGzip(new Blob([]))).toBe(false)
    expect(await isGzip(new Blob([new Uint8Array([0x1F])]))).toBe(false)
  })
})
