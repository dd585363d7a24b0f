import { setResponseStatus } from 'h3'
import { newTokenSchema, tokenBody } from '../../../shared/schemas/tokens'
import { defineStreamHandler } from '../../utils/api'
import { checkPassword } from '../../utils/password'
import { makeToken } from '../../utils/tokens'

export default defineStreamHandler({
  about: 'A new token, told this one time. Asks for the password again.',
  who: 'person',
  body: tokenBody,
  status: 201,
  answer: newTokenSchema,
  stream: async ({ event, transaction, body, person }) => {
    await checkPassword(event, transaction, person.id, { path: 'password', typed: body.password })
    const made = await transaction(db => makeToken(db, person.id, body))
    setResponseStatus(event, 201)
    return made
  },
})
