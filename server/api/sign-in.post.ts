import { meSchema, signInBody } from '../../shared/schemas/people'
import { defineApiHandler } from '../utils/api'
import { asPerson } from '../utils/db/transactions'
import { countPasswordAttempt } from '../utils/limits'
import { readMe } from '../utils/people'
import { ProblemError } from '../utils/problems'
import { startSession } from '../utils/sessions'

interface Credentials { id: string, password_hash: string, session_epoch: number }

let decoy: Promise<string> | undefined

export default defineApiHandler({
  about: 'Signs a person in with a session cookie. Programs use a token instead.',
  who: 'anyone',
  body: signInBody,
  answer: meSchema,
  handler: async ({ event, nobody, body }) => {
    const attempt = await countPasswordAttempt(event, body.email)
    const { rows } = await nobody(db => db.raw<{ rows: Credentials[] }>('select * from app.credentials(?)', [body.email]))
    const found = rows[0]
    // An unknown address takes as long as a wrong password, or the time would tell which addresses have an account.
    decoy ??= hashPassword('an account that does not exist')
    const right = await verifyPassword(found?.password_hash ?? await decoy, body.password)
    if (!found || !right) throw new ProblemError(401, 'Not signed in', 'The e-mail address or the password is not right.')
    await attempt.giveBack()
    await startSession(event, found.id, found.session_epoch)
    return asPerson(found.id, db => readMe(db, found.id))
  },
})
