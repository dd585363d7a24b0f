import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { defineComponent, h } from 'vue'
import { useUpload, type Upload } from '../../composables/useUpload'
import { LOG_LIMIT_BYTES } from '../../shared/gzip'

// What compressing does to bytes is tested in node; the streams of happy-dom are not those of a browser.
vi.mock('../../shared/gzip', async original => ({
  ...await original<typeof import('../../shared/gzip')>(),
  gzip: async (file: Blob, onRead: (share: number) => void) => {
    onRead(1)
    return new Blob([new Uint8Array([0x1F, 0x8B]), file])
  },
}))

const LOG_ID = '01890000-0000-7000-8000-000000000001'

/** A request whose answer and line the test holds in its hands. */
class FakeRequest {
  static sent: FakeRequest[] = []
  upload: { onprogress: ((event: { loaded: number, total: number }) => void) | null } = { onprogress: null }
  onload = () => {}
  onerror = () => {}
  onabort = () => {}
  onloadend = () => {}
  status = 0
  responseText = ''
  url = ''
  body: FormData | null = null

  open(_method: string, url: string) {
    this.url = url
  }

  setRequestHeader() {}

  send(body: FormData) {
    this.body = body
    FakeRequest.sent.push(this)
  }

  abort() {
    this.onabort()
    this.onloadend()
  }

  answer(status: number, body: unknown) {
    this.status = status
    this.responseText = JSON.stringify(body)
    this.onload()
    this.onloadend()
  }
}

const open: { unmount: () => void }[] = []

async function page() {
  const onSent = vi.fn<(upload: Upload) => void>()
  const onIdle = vi.fn<(round: Upload[]) => void>()
  let upload!: ReturnType<typeof useUpload>
  open.push(await mountSuspended(defineComponent(() => {
    upload = useUpload({ onSent, onIdle })
    return () => h('div')
  })))
  return { ...upload, onSent, onIdle }
}

const file = (name: string, text = 'time_s,lat,lon\n0,54.4,-2.9\n') => new File([text], name, { type: 'text/csv' })
const request = (i: number) => vi.waitFor(() => {
  const sent = FakeRequest.sent[i]
  if (!sent) throw new Error('not sent yet')
  return sent
})

describe('useUpload', () => {
  beforeEach(() => {
    FakeRequest.sent = []
    vi.stubGlobal('XMLHttpRequest', FakeRequest)
  })
  afterEach(() => {
    vi.useRealTimers()
    for (const wrapper of open.splice(0)) wrapper.unmount()
    vi.unstubAllGlobals()
    vi.restoreAllMocks()
  })

  it('compresses a file, sends it under a name that says so, and tells the share that left', async () => {
    const { uploads, add, onSent } = await page()
    const append = vi.spyOn(FormData.prototype, 'append')
    add([file('a.csv')], '/api/outings/1/logs')
    const sent = await request(0)
    expect(sent.url).toBe('/api/outings/1/logs')
    const [field, part, name] = append.mock.calls[0] as unknown as [string, Blob, string]
    expect([field, name]).toEqual(['file', 'a.csv.gz'])
    expect([...new Uint8Array(await part.slice(0, 2).arrayBuffer())]).toEqual([0x1F, 0x8B])
    sent.upload.onprogress?.({ loaded: 31, total: 50 })
    expect(uploads.value[0]).toMatchObject({ state: 'sending', fraction: 0.62 })
    sent.answer(201, { id: LOG_ID, status: 'queued' })
    await vi.waitFor(() => expect(onSent).toHaveBeenCalledOnce())
    expect(uploads.value[0]).toMatchObject({ state: 'sent', log: { id: LOG_ID, status: 'queued' } })
  })

  it('sends a file that is gzip already as it is', async () => {
    const { add } = await page()
    add([new File([new Uint8Array([0x1F, 0x8B, 8, 0])], 'b.csv.gz')], '/x')
    const part = (await request(0)).body?.get('file') as File
    expect([part.name, part.size]).toEqual(['b.csv.gz', 4])
  })

  it('sends one file after another and tells when all are through', async () => {
    const { add, onIdle } = await page()
    add([file('a.csv'), file('b.csv')], '/x')
    const first = await request(0)
    expect(FakeRequest.sent).toHaveLength(1)
    first.answer(201, { id: LOG_ID, status: 'mapping' })
    const second = await request(1)
    expect(onIdle).not.toHaveBeenCalled()
    second.answer(201, { id: LOG_ID, status: 'queued' })
    await vi.waitFor(() => expect(onIdle).toHaveBeenCalledOnce())
    expect(onIdle.mock.calls[0]?.[0].map(each => each.log?.status)).toEqual(['mapping', 'queued'])
  })

  it('says that the team has the same file, and where', async () => {
    const { uploads, add, onSent } = await page()
    add([file('a.csv')], '/x')
    const problem = { type: 'about:blank', title: 'Here already', status: 409, detail: 'x', see: `/logs/${LOG_ID}` };
    (await request(0)).answer(409, problem)
    await vi.waitFor(() => expect(uploads.value[0]?.state).toBe('same'))
    expect(uploads.value[0]?.problem?.see).toBe(`/logs/${LOG_ID}`)
    expect(onSent).not.toHaveBeenCalled()
  })

  it('keeps the file when the line is cut and sends it again on request', async () => {
    const { uploads, add, retry } = await page()
    add([file('a.csv')], '/x')
    const first = await request(0)
    first.upload.onprogress?.({ loaded: 1, total: 4 })
    first.onerror()
    await vi.waitFor(() => expect(uploads.value[0]?.state).toBe('cut'))
    expect(uploads.value[0]?.problem?.detail).toContain('25 %')
    retry(uploads.value[0]!.key);
    (await request(1)).answer(201, { id: LOG_ID, status: 'queued' })
    await vi.waitFor(() => expect(uploads.value[0]).toMatchObject({ state: 'sent', problem: null }))
  })

  it('does not wait for a line that is gone', async () => {
    const { uploads, add, retry } = await page()
    add([file('a.csv')], '/x')
    await request(0)
    window.dispatchEvent(new Event('offline'))
    await vi.waitFor(() => expect(uploads.value[0]?.state).toBe('cut'))
    vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout'] })
    retry(uploads.value[0]!.key)
    await vi.waitUntil(() => FakeRequest.sent.length === 2)
    await vi.advanceTimersByTimeAsync(59_000)
    FakeRequest.sent[1]?.upload.onprogress?.({ loaded: 1, total: 2 })
    await vi.advanceTimersByTimeAsync(59_000)
    expect(uploads.value[0]?.state).toBe('sending')
    await vi.advanceTimersByTimeAsync(2000)
    vi.useRealTimers()
    await vi.waitFor(() => expect(uploads.value[0]?.state).toBe('cut'))
  })

  it('stops a file that is cancelled and goes on with the next', async () => {
    const { uploads, add, cancel } = await page()
    add([file('a.csv'), file('b.csv')], '/x')
    const first = await request(0)
    const aborted = vi.spyOn(first, 'abort')
    cancel(uploads.value[0]!.key)
    expect(aborted).toHaveBeenCalledOnce();
    (await request(1)).answer(201, { id: LOG_ID, status: 'queued' })
    await vi.waitFor(() => expect(uploads.value.map(each => each.state)).toEqual(['cancelled', 'sent']))
  })

  it('does not send what cannot be a log', async () => {
    const { uploads, add } = await page()
    const huge = file('c.csv')
    Object.defineProperty(huge, 'size', { value: LOG_LIMIT_BYTES + 1 })
    add([new File([], 'a.csv'), huge], '/x')
    expect(uploads.value.map(each => [each.state, each.problem?.title])).toEqual([
      ['failed', 'This file is empty.'], ['failed', 'This file is too large.'],
    ])
    expect(FakeRequest.sent).toHaveLength(0)
  })

  it('shows the words of a refusal, and its own when the server had none', async () => {
    const { uploads, add } = await page()
    add([file('a.csv')], '/x');
    (await request(0)).answer(502, 'bad gateway')
    await vi.waitFor(() => expect(uploads.value[0]?.state).toBe('failed'))
    expect(uploads.value[0]?.problem?.title).toBe('The server could not take the file.')
  })
})
