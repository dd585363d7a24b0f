import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { removeRow } from '../../utils/removal'

export default defineApiHandler({
  about: 'Removes a setup revision that was never driven.',
  who: { action: 'setups.write', of: 'setup' },
  params: idParams,
  answer: undefined,
  handler: async ({ db, params }) => {
    await removeRow(db, 'setup_revisions', params.id)
    return undefined
  },
})
