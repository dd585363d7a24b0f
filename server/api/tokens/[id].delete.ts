import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { notFound } from '../../utils/problems'

export default defineApiHandler({
  about: 'Revokes one of the person’s own tokens: it is refused from now on.',
  who: 'person',
  params: idParams,
  answer: undefined,
  handler: async ({ db, params }) => {
    if (!await db('api_tokens').where('id', params.id).delete()) throw notFound('token')
    return undefined
  },
})
