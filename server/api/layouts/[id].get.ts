import { layoutSchema } from '../../../shared/schemas/circuits'
import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readLayout } from '../../utils/circuits'

export default defineApiHandler({
  about: 'One layout with its timing lines.',
  who: { action: 'read', of: 'layout' },
  params: idParams,
  answer: layoutSchema,
  handler: ({ db, params }) => readLayout(db, params.id),
})
