import type { ComparisonSheet } from '#shared/compare-sheet'
import { sheetOf } from '#shared/compare-sheet'
import type { Comparison } from '#shared/schemas/compare'
import { problemOf } from './useApi'

/**
 * Two laps held against each other. The sheet (sentences, small figures) comes with the page; the traces are fetched by
 * the browser alone, because they are some hundred kilobytes.
 * @throws a page error (404) when one of the laps is not there or not the reader's
 */
export async function useComparison(lap: string, against: string) {
  const request = useRequestFetch()
  const figures = useFigures()
  const fetchBoth = () => request<Comparison>('/api/compare', { query: { lap, against } })
  const comparison = shallowRef<Comparison | null>(null)
  const failed = ref(false)
  onMounted(fetchTraces)

  const { data, error } = await useAsyncData<ComparisonSheet>(`compare:${lap}:${against}`, async () => {
    const answer = await fetchBoth()
    if (import.meta.client) comparison.value = markRaw(answer)
    return sheetOf(answer, figures)
  })
  if (error.value || !data.value) {
    const problem = problemOf(error.value ?? {})
    throw createError({ statusCode: problem.status || 503, message: problem.detail || problem.title, fatal: true })
  }

  async function fetchTraces() {
    failed.value = false
    try {
      comparison.value ??= markRaw(await fetchBoth())
    }
    catch {
      failed.value = true
    }
  }
  return { sheet: data as Ref<ComparisonSheet>, comparison, failed, fetchTraces }
}
