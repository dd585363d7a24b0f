import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { removeRow } from '../../utils/removal'

export default defineApiHandler({
  about: 'Removes a layout on which nothing was driven, with its lines.',
  who: { action: 'circuits.write', of: 'layout' },
  params: idParams,
  answer: undefined,
  handler: async ({ db, params }) => {
    await removeRow(db, 'layouts', params.id)
    return undefined
  },
})
