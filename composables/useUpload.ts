import { gzip, isGzip, LOG_LIMIT_BYTES } from '#shared/gzip'
import type { Problem } from '#shared/schemas/common'
import { problemSchema } from '#shared/schemas/common'
import type { LogSummary } from '#shared/schemas/days'

export type UploadState = 'waiting' | 'packing' | 'sending' | 'sent' | 'same' | 'failed' | 'cut' | 'cancelled'

/** One file on its way to the server. */
export interface Upload {
  key: number
  fileName: string
  sizeBytes: number
  state: UploadState
  /** Share of the bytes read (packing) or sent (sending), 0 to 1. */
  fraction: number
  /** Bytes that go over the line: fewer than the file has when it was compressed. */
  sendBytes: number | null
  problem: Problem | null
  log: Pick<LogSummary, 'id' | 'status'> | null
}

interface Parcel { file: File, url: string, packed: Blob | null, name: string, stop: AbortController }

const LEAVE = 'A file is still on its way. Leave this sheet and stop it?'
const LONGEST_SILENCE_MS = 60_000
const ACTIVE: readonly UploadState[] = ['waiting', 'packing', 'sending']

/**
 * Sends logs to an outing, one file after another: compressed in the browser where it can be, with the progress of the
 * bytes that really left. Nothing is lost when the line is cut: the file stays chosen and can be sent again.
 * @param options.onSent called after each file that the server took
 * @param options.onIdle called when nothing is left to send, with the files of this round
 */
export function useUpload(options: { onSent?: (upload: Upload) => void, onIdle?: (round: Upload[]) => void }) {
  const uploads = ref<Upload[]>([])
  const parcels = new Map<number, Parcel>()
  const busy = computed(() => uploads.value.some(upload => ACTIVE.includes(upload.state)))
  let [nextKey, running] = [0, false]

  /** @param url of the outing the files belong to, as it is now: choosing another one later moves nothing. */
  function add(files: Iterable<File>, url: string) {
    for (const file of files) {
      const key = nextKey++
      parcels.set(key, { file, url, packed: null, name: file.name, stop: new AbortController() })
      uploads.value.push(newUpload(key, file))
    }
    void run()
  }

  async function run() {
    if (running) return
    running = true
    const round: Upload[] = []
    for (;;) {
      const upload = uploads.value.find(each => each.state === 'waiting')
      if (!upload) break
      round.push(upload)
      await carry(upload, parcels.get(upload.key)!)
      if (upload.state === 'sent') options.onSent?.(upload)
    }
    running = false
    if (round.length > 0) options.onIdle?.(round)
  }

  function cancel(key: number) {
    const upload = uploads.value.find(each => each.key === key)
    if (!upload || !ACTIVE.includes(upload.state)) return
    upload.state = 'cancelled'
    parcels.get(key)?.stop.abort()
  }

  function retry(key: number) {
    const [upload, parcel] = [uploads.value.find(each => each.key === key), parcels.get(key)]
    if (!upload || !parcel || ACTIVE.includes(upload.state)) return
    parcel.stop = new AbortController()
    Object.assign(upload, { state: 'waiting', fraction: 0, problem: null })
    void run()
  }

  function dismiss(key: number) {
    cancel(key)
    parcels.delete(key)
    uploads.value = uploads.value.filter(each => each.key !== key)
  }

  useLeaveWarning(busy, () => uploads.value.forEach(upload => cancel(upload.key)))
  return { uploads, busy, add, cancel, retry, dismiss }
}

function newUpload(key: number, file: File): Upload {
  const problem = refusal(file)
  const state = problem ? 'failed' : 'waiting'
  return { key, fileName: file.name, sizeBytes: file.size, state, fraction: 0, sendBytes: null, problem, log: null }
}

/** What can be said of a file before a byte of it is sent. */
function refusal(file: File): Problem | null {
  const problem = (title: string, detail: string): Problem => ({ type: 'about:blank', status: 0, title, detail })
  if (file.size === 0) return problem('This file is empty.', 'Look whether the logger has finished writing it.')
  if (file.size > LOG_LIMIT_BYTES) return problem('This file is too large.', 'A log may have at most 200 MB. Cut the recording into single outings and send them one by one.')
  return null
}

/** Carries one file over: compress, send, and write down how it went. Never throws. */
async function carry(upload: Upload, parcel: Parcel) {
  const { signal } = parcel.stop
  try {
    if (!parcel.packed) {
      upload.state = 'packing'
      await pack(upload, parcel)
    }
    signal.throwIfAborted()
    Object.assign(upload, { state: 'sending', fraction: 0, sendBytes: parcel.packed!.size })
    const { status, body } = await send(parcel, share => (upload.fraction = share))
    settle(upload, status, body)
  }
  catch (error) {
    // Whoever cancelled has said so in the state already.
    if (signal.aborted) return
    const cut = error instanceof CutError
    upload.state = cut ? 'cut' : 'failed'
    upload.problem = cut
      ? { type: 'about:blank', status: 0, title: 'The connection was cut.', detail: `${Math.round(upload.fraction * 100)} % had left. The file is still chosen; try again when there is a network.` }
      : { type: 'about:blank', status: 0, title: 'The file could not be read.', detail: 'It may have been changed or taken away since it was chosen. Choose it again.' }
  }
}

async function pack(upload: Upload, parcel: Parcel) {
  const packs = typeof CompressionStream === 'function' && !await isGzip(parcel.file)
  if (!packs) {
    parcel.packed = parcel.file
    return
  }
  parcel.packed = await gzip(parcel.file, share => (upload.fraction = share), parcel.stop.signal)
  parcel.name = `${parcel.file.name}.gz`
}

class CutError extends Error {}

/** XMLHttpRequest, because fetch does not tell how much of a body has left. */
function send(parcel: Parcel, onSent: (share: number) => void): Promise<{ status: number, body: unknown }> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest()
    const form = new FormData()
    form.append('file', parcel.packed!, parcel.name)
    const line = watchLine(() => request.abort())
    request.upload.onprogress = (event) => {
      line.alive()
      onSent(event.total > 0 ? event.loaded / event.total : 0)
    }
    request.onload = () => resolve({ status: request.status, body: parse(request.responseText) })
    request.onerror = () => reject(new CutError())
    request.onabort = () => reject(new CutError())
    request.onloadend = () => line.leave()
    parcel.stop.signal.addEventListener('abort', () => request.abort(), { once: true })
    request.open('POST', parcel.url)
    request.setRequestHeader('accept', 'application/json')
    request.send(form)
  })
}

/**
 * Gives a request up when the device loses its network, or when nothing has moved for a minute: left alone, the browser
 * would wait for many of them before it calls such a line dead.
 */
function watchLine(giveUp: () => void) {
  let timer = setTimeout(giveUp, LONGEST_SILENCE_MS)
  window.addEventListener('offline', giveUp)
  return {
    alive() {
      clearTimeout(timer)
      timer = setTimeout(giveUp, LONGEST_SILENCE_MS)
    },
    leave() {
      clearTimeout(timer)
      window.removeEventListener('offline', giveUp)
    },
  }
}

function parse(text: string): unknown {
  try {
    return JSON.parse(text)
  }
  catch {
    return null
  }
}

function settle(upload: Upload, status: number, body: unknown) {
  if (status >= 200 && status < 300) {
    const { id, status: logStatus } = body as LogSummary
    Object.assign(upload, { state: 'sent', fraction: 1, log: { id, status: logStatus } })
    return
  }
  const described = problemSchema.safeParse(body)
  upload.problem = described.success
    ? described.data
    : { type: 'about:blank', status, title: 'The server could not take the file.', detail: 'It is still chosen; try again.' }
  upload.state = status === 409 && upload.problem.see ? 'same' : 'failed'
  if (status === 401) upload.problem = { ...upload.problem, title: 'You are not signed in any more.', see: `/sign-in?back=${encodeURIComponent(location.pathname)}` }
}

/** Asks before a running upload is lost, and stops what is left when the sheet goes. */
function useLeaveWarning(busy: Ref<boolean>, stop: () => void) {
  if (import.meta.server) return
  const router = useRouter()
  const onUnload = (event: BeforeUnloadEvent) => {
    if (busy.value) event.preventDefault()
  }
  const release = router.beforeEach((to, from) => !busy.value || to.path === from.path || window.confirm(LEAVE))
  onMounted(() => window.addEventListener('beforeunload', onUnload))
  onBeforeUnmount(() => {
    window.removeEventListener('beforeunload', onUnload)
    release()
    stop()
  })
}
