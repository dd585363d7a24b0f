import { idParams } from '../../../shared/schemas/common'
import { dayBody } from '../../../shared/schemas/days'
import { defineApiHandler } from '../../utils/api'
import { readDay } from '../../utils/days'

export default defineApiHandler({
  who: { action: 'days.write', of: 'day' },
  params: idParams,
  body: dayBody,
  handler: async ({ db, params, body }) => {
    await db('track_days').where('id', params.id)
      .update({ circuit_id: body.circuitId, date: body.date, name: body.name, notes: body.notes })
    return readDay(db, params.id)
  },
})
