import { idParams } from '../../../shared/schemas/common'
import { carChange, carSchema } from '../../../shared/schemas/setups'
import { defineApiHandler } from '../../utils/api'
import { readCars } from '../../utils/cars'
import { replaceSheet } from '../../utils/versions'

export default defineApiHandler({
  about: 'Replaces what is said of a car.',
  who: { action: 'cars.write', of: 'car' },
  params: idParams,
  body: carChange,
  answer: carSchema,
  handler: async ({ db, teamId, params, body: { basedOnVersion, ...body } }) => {
    await replaceSheet(db, 'cars', params.id, basedOnVersion, body)
    return (await readCars(db, teamId, params.id))[0]!
  },
})
