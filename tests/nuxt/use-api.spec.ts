import { describe, expect, it } from 'vitest'
import { problemOf } from '../../composables/useApi'

describe('problemOf', () => {
  it('hands on the problem that the server described', () => {
    const problem = { type: 'about:blank', title: 'Name taken', status: 409, detail: 'There is one of this name.' }
    expect(problemOf({ data: problem, statusCode: 409, response: {} })).toEqual(problem)
  })

  it('says that nobody answered when there was no answer', () => {
    expect(problemOf(new TypeError('fetch failed'))).toMatchObject({
      status: 0, title: 'The server could not be reached.', detail: 'What you typed is still here; try again.',
    })
  })

  it('does not show a page of some proxy as if it were a problem', () => {
    const answer = problemOf({ data: '<html>Bad gateway</html>', statusCode: 502, response: {} })
    expect([answer.status, answer.title]).toEqual([502, 'The server could not answer.'])
  })
})
