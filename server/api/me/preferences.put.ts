import { meSchema, preferencesSchema } from '../../../shared/schemas/people'
import { defineApiHandler } from '../../utils/api'
import { readMe, savePreferences } from '../../utils/people'

export default defineApiHandler({
  about: 'Choose units, the language of figures, and paper or a dark sheet, for oneself.',
  who: 'person',
  body: preferencesSchema,
  answer: meSchema,
  handler: async ({ db, person, body }) => {
    await savePreferences(db, person.id, body)
    return readMe(db, person.id)
  },
})
