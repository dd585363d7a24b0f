import { setupSchema } from '../../../shared/schemas/setups'
import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readSetup } from '../../utils/cars'

export default defineApiHandler({
  about: 'One setup revision with its sheet.',
  who: { action: 'read', of: 'setup' },
  params: idParams,
  answer: setupSchema,
  handler: ({ db, params }) => readSetup(db, params.id),
})
