import { listOf } from '../../../shared/schemas/common'
import { tokenSchema } from '../../../shared/schemas/tokens'
import { defineApiHandler } from '../../utils/api'
import { readTokens } from '../../utils/tokens'

export default defineApiHandler({
  about: 'The person’s own tokens, the newest first.',
  who: 'person',
  answer: listOf(tokenSchema),
  handler: async ({ db }) => ({ items: await readTokens(db) }),
})
