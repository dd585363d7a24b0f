import { describe, expect, it } from 'vitest'
import { createProblems } from '../../../../../server/utils/laps/problems'

describe('createProblems', () => {
  it('makes one entry of a group, with its first row and message and a count', () => {
    const problems = createProblems()
    problems.add('bad 3', { code: 'bad_number', message: 'first', row: 7 })
    problems.add('bad 3', { code: 'bad_number', message: 'second', row: 9 })
    problems.add('bad 4', { code: 'bad_number', message: 'other', row: 8 })
    expect(problems.list()).toEqual([
      { code: 'bad_number', message: 'first', row: 7, count: 2 },
      { code: 'bad_number', message: 'other', row: 8, count: 1 },
    ])
  })

  it('lists at most fifty groups and says how many problems are left out', () => {
    const problems = createProblems()
    for (let i = 0; i < 60; i++) problems.add(`bad ${i}`, { code: 'bad_number', message: 'x', row: 2 })
    problems.add('bad 0', { code: 'bad_number', message: 'x', row: 3 })
    const list = problems.list()
    expect(list).toHaveLength(51)
    expect(list[0]).toMatchObject({ count: 2 })
    expect(list.at(-1)!.message).toContain('10 further problems')
  })

  it('gives copies', () => {
    const problems = createProblems()
    problems.add('a', { code: 'a', message: 'a' })
    problems.list()[0]!.count = 99
    expect(problems.list()[0]!.count).toBe(1)
  })
})
