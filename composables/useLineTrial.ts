import type { DraftLine } from '#shared/lines'
import type { LineTrial } from '#shared/schemas/circuits'
import { ProblemError } from './useApi'

/**
 * What the lines as drawn would do to a log, asked from the server a moment after they have come to rest. Nothing is
 * stored by it.
 */
export function useLineTrial(layoutId: string, logId: Ref<string | null>, lines: Ref<DraftLine[]>) {
  const api = useApi()
  const trial = shallowRef<LineTrial | null>(null)
  const asking = ref(false)
  const trouble = ref('')
  let waiting: ReturnType<typeof setTimeout> | undefined
  let running: AbortController | null = null

  async function ask() {
    running?.abort()
    const mine = running = new AbortController()
    const hasStart = lines.value.some(line => line.kind === 'start_finish')
    if (!logId.value || !hasStart) {
      trial.value = null
      asking.value = false
      return
    }
    try {
      trial.value = await api<LineTrial>(`/api/layouts/${layoutId}/line-trials`, {
        method: 'POST', signal: mine.signal,
        body: { logId: logId.value, lines: lines.value.map(({ kind, ordinal, a, b }) => ({ kind, ordinal, a, b })) },
      })
      trouble.value = ''
    }
    catch (error) {
      if (!mine.signal.aborted) trouble.value = error instanceof ProblemError ? error.problem.detail || error.problem.title : 'The laps could not be tried.'
    }
    finally {
      if (running === mine) asking.value = false
    }
  }

  onMounted(() => {
    watch([lines, logId], () => {
      clearTimeout(waiting)
      asking.value = true
      waiting = setTimeout(ask, 350)
    }, { immediate: true })
  })
  onBeforeUnmount(() => {
    clearTimeout(waiting)
    running?.abort()
  })
  return { trial, asking, trouble }
}
