import { carSchema } from '../../../shared/schemas/setups'
import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readCars } from '../../utils/cars'

export default defineApiHandler({
  about: 'One car with its setup revisions.',
  who: { action: 'read', of: 'car' },
  params: idParams,
  answer: carSchema,
  handler: async ({ db, teamId, params }) => (await readCars(db, teamId, params.id))[0]!,
})
