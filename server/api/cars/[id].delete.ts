import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { removeRow } from '../../utils/removal'

export default defineApiHandler({
  about: 'Removes a car that was never driven, with its setup sheets.',
  who: { action: 'cars.write', of: 'car' },
  params: idParams,
  answer: undefined,
  handler: async ({ db, params }) => {
    await removeRow(db, 'cars', params.id)
    return undefined
  },
})
