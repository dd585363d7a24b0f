import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readLayout } from '../../utils/circuits'

export default defineApiHandler({
  who: { action: 'read', of: 'layout' },
  params: idParams,
  handler: ({ db, params }) => readLayout(db, params.id),
})
