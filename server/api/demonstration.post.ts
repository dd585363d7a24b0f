import { demonstrationSchema } from '../../shared/schemas/days'
import { setResponseStatus } from 'h3'
import { teamQuery } from '../../shared/schemas/common'
import { defineStreamHandler } from '../utils/api'
import { makeDemonstration } from '../utils/demonstration'

export default defineStreamHandler({
  about: 'Writes the demonstration into the team; again it leads to the one that is there.',
  who: { action: 'days.write', of: 'team' },
  query: teamQuery,
  status: 201,
  elseStatus: 200,
  answer: demonstrationSchema,
  stream: async ({ event, person, teamId, transaction }) => {
    const answer = await makeDemonstration({ teamId, personId: person.id }, transaction)
    setResponseStatus(event, answer.made ? 201 : 200)
    return answer
  },
})
