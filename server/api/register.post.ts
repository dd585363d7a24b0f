import { registerBody } from '../../shared/schemas/people'
import { defineApiHandler } from '../utils/api'
import { readMe } from '../utils/people'
import { startSession } from '../utils/sessions'

/** A new person with a team of their own, signed in. */
export default defineApiHandler({
  who: 'anyone',
  body: registerBody,
  status: 201,
  handler: async ({ event, db, body }) => {
    const hash = await hashPassword(body.password)
    const { rows } = await db.raw<{ rows: { id: string }[] }>('select app.register(?, ?, ?, ?) as id', [body.name, body.email, hash, body.teamName])
    const userId = rows[0]!.id
    await db.raw('select set_config(\'lapwright.user_id\', ?, true)', [userId])
    const me = await readMe(db, userId)
    await startSession(event, userId, 1)
    return me
  },
})
