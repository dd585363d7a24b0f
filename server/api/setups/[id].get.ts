import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readSetup } from '../../utils/cars'

export default defineApiHandler({
  who: { action: 'read', of: 'setup' },
  params: idParams,
  handler: ({ db, params }) => readSetup(db, params.id),
})
