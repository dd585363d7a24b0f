import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readCars } from '../../utils/cars'

export default defineApiHandler({
  who: { action: 'read', of: 'car' },
  params: idParams,
  handler: async ({ db, teamId, params }) => (await readCars(db, teamId, params.id))[0]!,
})
