import { isUnderWay, withNews } from '#shared/log-words'
import type { LogProgress, LogSummary } from '#shared/schemas/days'
import { logProgressSchema } from '#shared/schemas/days'

/** A browser holds six connections to a host at most, and uploads need some. Logs are read one after another anyway. */
const MOST_STREAMS = 3
const [FIRST_WAIT_MS, LONGEST_WAIT_MS] = [1000, 15_000]

interface Followed { stream: EventSource | null, timer: ReturnType<typeof setTimeout> | undefined, waitMs: number }

/**
 * Follows logs while the server reads them, over server-sent events. Connections that break are opened again; all are
 * closed when a log has settled and when the component goes.
 * @param onSettled called once for each log that needs nothing of the server any more (read, refused, gone, or waiting
 *   for a person)
 */
export function useLogProgress(onSettled: (logId: string) => void) {
  /** What is known of each log, by its id. */
  const progress = reactive<Record<string, LogProgress>>({})
  /** Whether some stream is broken just now. */
  const cut = ref(false)
  const followed = new Map<string, Followed>()

  function follow(logId: string) {
    if (import.meta.server || followed.has(logId)) return
    // What was told before it settled the last time is old news now.
    Reflect.deleteProperty(progress, logId)
    followed.set(logId, { stream: null, timer: undefined, waitMs: FIRST_WAIT_MS })
    openNext()
  }

  function openNext() {
    const all = [...followed]
    const free = MOST_STREAMS - all.filter(([, each]) => each.stream ?? each.timer).length
    const idle = all.filter(([, { stream, timer }]) => !stream && !timer)
    for (const [logId, each] of idle.slice(0, Math.max(0, free))) open(logId, each)
  }

  function open(logId: string, each: Followed) {
    each.timer = undefined
    each.stream = listen(logId, told, () => (cut.value = true), () => {
      each.stream = null
      each.timer = setTimeout(() => void again(logId, each), each.waitMs)
      each.waitMs = Math.min(LONGEST_WAIT_MS, 2 * each.waitMs)
    })

    function told(news: LogProgress) {
      each.waitMs = FIRST_WAIT_MS
      cut.value = false
      progress[logId] = withNews(progress[logId], news)
      if (!isUnderWay(news.status)) settle(logId)
    }
  }

  /** Before a closed stream is opened again: a log that was removed meanwhile is gone. */
  async function again(logId: string, each: Followed) {
    const gone = await isGone(logId)
    if (followed.get(logId) !== each) return
    if (!gone) return open(logId, each)
    cut.value = false
    settle(logId)
  }

  function unfollow(logId: string) {
    followed.get(logId)?.stream?.close()
    clearTimeout(followed.get(logId)?.timer)
    followed.delete(logId)
  }

  function settle(logId: string) {
    unfollow(logId)
    openNext()
    onSettled(logId)
  }

  onBeforeUnmount(() => [...followed.keys()].forEach(unfollow))
  return { progress, cut, follow, unfollow }
}

/** One stream. `lost` is called on every break, `closed` when the browser will not open it again by itself. */
function listen(logId: string, told: (news: LogProgress) => void, lost: () => void, closed: () => void): EventSource {
  const stream = new EventSource(`/api/logs/${logId}/events`)
  stream.onmessage = (event: MessageEvent<string>) => {
    const news = logProgressSchema.safeParse(parseJson(event.data))
    if (news.success) told(news.data)
  }
  stream.onerror = () => {
    lost()
    if (stream.readyState === EventSource.CLOSED) closed()
  }
  return stream
}

async function isGone(logId: string): Promise<boolean> {
  const status = await fetch(`/api/logs/${logId}`).then(answer => answer.status, () => 0)
  return status === 404 || status === 401
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text)
  }
  catch {
    return null
  }
}

/**
 * Keeps the logs of a page alive: every log that is under way is followed, and the page is read again when one settles.
 * @param logs the logs of the page as they were read last
 * @param refresh reads the page again
 */
export function useLiveLogs(logs: () => readonly Pick<LogSummary, 'id' | 'status'>[], refresh: () => Promise<void>) {
  const { progress, cut, follow } = useLogProgress(() => void refresh())
  onMounted(() => {
    watch(logs, (now) => {
      for (const log of now.filter(each => isUnderWay(each.status))) follow(log.id)
    }, { immediate: true })
  })
  return { progress, cut }
}
