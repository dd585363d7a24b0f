import type { Me } from '#shared/schemas/people'

/** Learns who is signed in, once: on the server, with the first page; the store's state goes to the browser with it. */
export default defineNuxtPlugin({
  name: 'lapwright-session',
  dependsOn: ['pinia'],
  async setup() {
    if (import.meta.client) return
    const session = useSessionStore()
    try {
      session.me = await useRequestFetch()<Me>('/api/me')
    }
    catch (error) {
      // While an error page is drawn the question may be the very thing that failed.
      if (useError().value) return
      const status = (error as { statusCode?: number }).statusCode
      if (status !== 401) throw createError({ statusCode: status ?? 503, message: 'Who is signed in could not be found out.', fatal: true })
    }
  },
})
