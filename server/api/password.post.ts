import { changePasswordBody } from '../../shared/schemas/people'
import { defineApiHandler } from '../utils/api'
import { ProblemError } from '../utils/problems'
import { startSession } from '../utils/sessions'

/** A new password ends every session of the person but this one. */
export default defineApiHandler({
  who: 'person',
  body: changePasswordBody,
  handler: async ({ event, db, body, person }) => {
    const { rows: [held] } = await db.raw<{ rows: { hash: string }[] }>('select app.my_password_hash() as hash')
    if (!held || !await verifyPassword(held.hash, body.currentPassword)) {
      const message = 'This is not your present password.'
      throw new ProblemError(422, 'Password not changed', message, { errors: [{ path: 'currentPassword', message }] })
    }
    const hash = await hashPassword(body.newPassword)
    const { rows: [changed] } = await db.raw<{ rows: { epoch: number }[] }>('select app.set_my_password(?) as epoch', [hash])
    await startSession(event, person.id, changed!.epoch)
    return undefined
  },
})
