import { problemOf } from './useApi'
import { FIRST_BOOK } from './useFirstBook'

/**
 * What a page is about, read on the server or the browser before it shows. A missing thing becomes the page's own 404,
 * an ended session leads to the sign-in page; whoever gets an answer can rely on it being there.
 * @param url of the API; a function when it depends on something that changes
 */
export async function usePageData<T>(url: string | (() => string)) {
  const route = useRoute()
  const router = useRouter()
  const session = useSessionStore()
  // Two pages that follow each other may ask the same thing: each has its own answer, or the second would show what the
  // first was told before something was saved.
  const { path } = route
  const key = typeof url === 'string' ? `${path} ${url}` : () => `${path} ${url()}`
  const answer = await useFetch<T>(url as string, { key })
  const error = answer.error.value
  if (error) {
    const problem = problemOf(error)
    if (problem.status === 401 && import.meta.client) {
      session.me = null
      void router.push(`/sign-in?back=${encodeURIComponent(route.fullPath)}`)
      // This page is never shown; the sign-in page takes its place.
      await new Promise(() => {})
    }
    // An address that cannot be an identifier leads as little to a sheet as one that belongs to nobody.
    const status = problem.status === 400 ? 404 : problem.status || 503
    throw createError({ statusCode: status, message: problem.detail, fatal: true })
  }
  /** What has changed here may be the next of the first steps, which a line at the head of the sheet follows. */
  const refresh = async () => {
    await answer.refresh()
    void refreshNuxtData(FIRST_BOOK)
  }
  return { data: answer.data as Ref<T>, refresh }
}
