import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { removeRow } from '../../utils/removal'

export default defineApiHandler({
  about: 'Removes a circuit at which nothing was driven, with its layouts.',
  who: { action: 'circuits.write', of: 'circuit' },
  params: idParams,
  answer: undefined,
  handler: async ({ db, params }) => {
    await removeRow(db, 'circuits', params.id)
    return undefined
  },
})
