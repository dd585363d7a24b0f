import { idParams, numberedSchema } from '../../../../shared/schemas/common'
import { outingBody } from '../../../../shared/schemas/days'
import { defineApiHandler } from '../../../utils/api'
import { lockNumbers } from '../../../utils/db/transactions'
import { outingColumns } from '../../../utils/outings'

export default defineApiHandler({
  about: 'A new outing of the day.',
  who: { action: 'outings.write', of: 'day' },
  params: idParams,
  body: outingBody,
  status: 201,
  answer: numberedSchema,
  handler: async ({ db, teamId, params, body }) => {
    const day = await db('track_days').where('id', params.id).first<{ circuit_id: string }>('circuit_id')
    await lockNumbers(db, params.id)
    const { last } = await db('outings').where('day_id', params.id)
      .max('number as last').first() as { last: number | null }
    const place = { team_id: teamId, day_id: params.id, circuit_id: day.circuit_id, number: (last ?? 0) + 1 }
    const [row] = await db('outings').insert({ ...place, ...outingColumns(body) })
      .returning<{ id: string, number: number }[]>(['id', 'number'])
    return row!
  },
})
