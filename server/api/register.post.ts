import { meSchema, registerBody } from '../../shared/schemas/people'
import { defineApiHandler } from '../utils/api'
import { asPerson } from '../utils/db/transactions'
import { readMe } from '../utils/people'
import { startSession } from '../utils/sessions'

export default defineApiHandler({
  about: 'A new person with a team of their own, signed in.',
  who: 'anyone',
  body: registerBody,
  status: 201,
  answer: meSchema,
  handler: async ({ event, nobody, body }) => {
    const values = [body.name, body.email, await hashPassword(body.password), body.teamName]
    const { rows } = await nobody(db =>
      db.raw<{ rows: { id: string }[] }>('select app.register(?, ?, ?, ?) as id', values))
    const userId = rows[0]!.id
    await startSession(event, userId, 1)
    return asPerson(userId, db => readMe(db, userId))
  },
})
