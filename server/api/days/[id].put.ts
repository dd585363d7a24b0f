import { idParams } from '../../../shared/schemas/common'
import { dayChange, daySchema } from '../../../shared/schemas/days'
import { defineApiHandler } from '../../utils/api'
import { moveStarts, readDay, readDayDate } from '../../utils/days'
import { replaceSheet } from '../../utils/versions'

export default defineApiHandler({
  about: 'Replaces what is said of a day; its outings move with its date.',
  who: { action: 'days.write', of: 'day' },
  params: idParams,
  body: dayChange,
  answer: daySchema,
  handler: async ({ db, params, body }) => {
    const before = await readDayDate(db, params.id)
    const columns = { circuit_id: body.circuitId, date: body.date, name: body.name, notes: body.notes }
    await replaceSheet(db, 'track_days', params.id, body.basedOnVersion, columns)
    await moveStarts(db, params.id, before, body.date)
    return readDay(db, params.id)
  },
})
