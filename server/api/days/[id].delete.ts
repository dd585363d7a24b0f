import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { removeRow } from '../../utils/removal'

export default defineApiHandler({
  about: 'Removes a day without outings.',
  who: { action: 'days.write', of: 'day' },
  params: idParams,
  answer: undefined,
  handler: async ({ db, params }) => {
    await removeRow(db, 'track_days', params.id)
    return undefined
  },
})
