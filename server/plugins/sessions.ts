import { loadPerson } from '../utils/access'
import { asPerson } from '../utils/db/transactions'

/** A session from before the last change of the password has ended, for pages as for routes. */
export default defineNitroPlugin(() => {
  sessionHooks.hook('fetch', async (session) => {
    const userId = session.user?.id
    if (!userId) return
    await asPerson(userId, db => loadPerson(db, userId, session.epoch)).catch(() => {
      throw createError({ statusCode: 401, message: 'The session has ended.' })
    })
  })
})
