import { idParams } from '../../../shared/schemas/common'
import { carBody } from '../../../shared/schemas/setups'
import { defineApiHandler } from '../../utils/api'
import { readCars } from '../../utils/cars'

export default defineApiHandler({
  who: { action: 'cars.write', of: 'car' },
  params: idParams,
  body: carBody,
  handler: async ({ db, teamId, params, body }) => {
    await db('cars').where('id', params.id).update(body)
    return (await readCars(db, teamId, params.id))[0]!
  },
})
