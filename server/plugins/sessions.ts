import { loadPerson } from '../utils/access'
import { asPerson } from '../utils/db/transactions'
import { problemOf } from '../utils/problems'

/** A session from before the last change of the password has ended, for pages as for routes. */
export default defineNitroPlugin(() => {
  sessionHooks.hook('fetch', async (session) => {
    const userId = session.user?.id
    if (!userId) return
    await asPerson(userId, db => loadPerson(db, userId, session.epoch)).catch((error) => {
      // A database that is away says nothing about a session.
      const { status, detail } = problemOf(error)?.problem ?? { status: 401, detail: 'The session has ended.' }
      throw createError({ statusCode: status, message: detail })
    })
  })
})
