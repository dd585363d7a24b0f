import { setResponseStatus } from 'h3'
import { changePasswordBody } from '../../shared/schemas/people'
import { defineStreamHandler } from '../utils/api'
import { checkPassword } from '../utils/password'
import { startSession } from '../utils/sessions'

export default defineStreamHandler({
  about: 'A new password. It ends every session of the person but this one; tokens stay.',
  who: 'person',
  body: changePasswordBody,
  answer: undefined,
  stream: async ({ event, transaction, body, person }) => {
    await checkPassword(event, transaction, person.id, { path: 'currentPassword', typed: body.currentPassword })
    const hash = await hashPassword(body.newPassword)
    const { rows: [changed] } = await transaction(db => db.raw<{ rows: { epoch: number }[] }>(
      'select app.set_my_password(?) as epoch', [hash]))
    await startSession(event, person.id, changed!.epoch)
    setResponseStatus(event, 204)
    return null
  },
})
