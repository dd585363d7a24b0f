import type { LogProblem } from '../../../shared/schemas/logs'

const MOST_KINDS = 50

export interface ProblemList {
  /** `key` names the group; problems of one group are one entry with the first row and a count. */
  add: (key: string, problem: { code: string, message: string, row?: number }) => void
  list: () => LogProblem[]
}

/** Collects problems in groups, so that a column that is bad in every row is one sentence and not 150 000. */
export function createProblems(): ProblemList {
  const groups = new Map<string, LogProblem & { count: number }>()
  let leftOut = 0
  return {
    add(key, problem) {
      const group = groups.get(key)
      if (group) group.count++
      else if (groups.size < MOST_KINDS) groups.set(key, { ...problem, count: 1 })
      else leftOut++
    },
    list() {
      const problems: LogProblem[] = [...groups.values()].map(group => ({ ...group }))
      if (leftOut > 0) problems.push({ code: 'more_problems', message: `${leftOut} further problems are not listed.` })
      return problems
    },
  }
}
