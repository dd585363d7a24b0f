import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { defineComponent, h, ref } from 'vue'
import { useLiveLogs, useLogProgress } from '../../composables/useLogProgress'
import type { LogSummary } from '../../shared/schemas/days'

const ID = (n: number) => `01890000-0000-7000-8000-00000000000${n}`

class FakeStream {
  static CLOSED = 2
  static opened: FakeStream[] = []
  readyState = 1
  onmessage: (event: { data: string }) => void = () => {}
  onerror = () => {}
  url: string

  constructor(url: string) {
    this.url = url
    FakeStream.opened.push(this)
  }

  close() {
    this.readyState = FakeStream.CLOSED
  }

  tell(logId: string, status: string, step: string | null, fraction: number) {
    this.onmessage({ data: JSON.stringify({ logId, status, step, fraction }) })
  }
}

const open: { unmount: () => void }[] = []
async function within<T>(use: () => T): Promise<T> {
  let result!: T
  open.push(await mountSuspended(defineComponent(() => {
    result = use()
    return () => h('div')
  })))
  return result
}
const stillOpen = () => FakeStream.opened.filter(stream => stream.readyState !== FakeStream.CLOSED)

describe('useLogProgress', () => {
  beforeEach(() => {
    FakeStream.opened = []
    vi.stubGlobal('EventSource', FakeStream)
    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] })
  })
  afterEach(() => {
    vi.useRealTimers()
    for (const wrapper of open.splice(0)) wrapper.unmount()
    vi.unstubAllGlobals()
  })

  it('follows a log through its steps and lets go of it once it is read', async () => {
    const settled = vi.fn()
    const { progress, follow } = await within(() => useLogProgress(settled))
    follow(ID(1))
    const [stream] = FakeStream.opened
    expect(stream?.url).toBe(`/api/logs/${ID(1)}/events`)
    stream?.tell(ID(1), 'processing', 'cut', 0.62)
    expect(progress[ID(1)]).toMatchObject({ step: 'cut', fraction: 0.62 })
    stream?.tell(ID(1), 'processing', null, 0)
    expect(progress[ID(1)]).toMatchObject({ step: 'cut', fraction: 0.62 })
    expect(settled).not.toHaveBeenCalled()
    stream?.tell(ID(1), 'ready', null, 1)
    expect(settled).toHaveBeenCalledExactlyOnceWith(ID(1))
    expect(stillOpen()).toHaveLength(0)
  })

  it('leaves connections for everything else: three streams at a time', async () => {
    const { follow } = await within(() => useLogProgress(() => {}))
    for (const n of [1, 2, 3, 4, 5]) follow(ID(n))
    expect(FakeStream.opened.map(stream => stream.url)).toEqual([1, 2, 3].map(n => `/api/logs/${ID(n)}/events`))
    FakeStream.opened[0]?.tell(ID(1), 'refused', null, 1)
    expect(stillOpen().map(stream => stream.url)).toEqual([2, 3, 4].map(n => `/api/logs/${ID(n)}/events`))
  })

  it('leaves a broken line to the browser, and opens a refused stream again after a while', async () => {
    vi.stubGlobal('fetch', vi.fn(async () => ({ status: 200 })))
    const { follow, cut } = await within(() => useLogProgress(() => {}))
    follow(ID(1))
    const [stream] = FakeStream.opened
    stream!.readyState = 0
    stream!.onerror()
    await vi.advanceTimersByTimeAsync(20_000)
    expect([FakeStream.opened.length, cut.value]).toEqual([1, true])
    stream!.close()
    stream!.onerror()
    await vi.advanceTimersByTimeAsync(1000)
    expect(FakeStream.opened).toHaveLength(2)
    FakeStream.opened[1]!.tell(ID(1), 'processing', 'read', 0.1)
    expect(cut.value).toBe(false)
  })

  it('stops asking for a log that was removed', async () => {
    vi.stubGlobal('fetch', vi.fn(async () => ({ status: 404 })))
    const settled = vi.fn()
    const { follow } = await within(() => useLogProgress(settled))
    follow(ID(1))
    FakeStream.opened[0]!.close()
    FakeStream.opened[0]!.onerror()
    await vi.advanceTimersByTimeAsync(60_000)
    expect(FakeStream.opened).toHaveLength(1)
    expect(settled).toHaveBeenCalledExactlyOnceWith(ID(1))
  })

  it('closes everything when the page goes', async () => {
    const { follow } = await within(() => useLogProgress(() => {}))
    follow(ID(1))
    follow(ID(2))
    for (const wrapper of open.splice(0)) wrapper.unmount()
    expect(stillOpen()).toHaveLength(0)
  })
})

describe('useLiveLogs', () => {
  beforeEach(() => {
    FakeStream.opened = []
    vi.stubGlobal('EventSource', FakeStream)
  })
  afterEach(() => {
    for (const wrapper of open.splice(0)) wrapper.unmount()
    vi.unstubAllGlobals()
  })

  it('follows what is under way, also what comes later, and reads the page again when it is done', async () => {
    const logs = ref<Pick<LogSummary, 'id' | 'status'>[]>([{ id: ID(1), status: 'ready' }, { id: ID(2), status: 'queued' }])
    const refresh = vi.fn(async () => {})
    await within(() => useLiveLogs(() => logs.value, refresh))
    expect(FakeStream.opened.map(stream => stream.url)).toEqual([`/api/logs/${ID(2)}/events`])
    logs.value = [...logs.value, { id: ID(3), status: 'processing' }]
    await vi.waitFor(() => expect(FakeStream.opened).toHaveLength(2))
    FakeStream.opened[0]!.tell(ID(2), 'ready', null, 1)
    expect(refresh).toHaveBeenCalledOnce()
  })
})
