// Programs that the examples of README.md run with, for the test that runs them.
import { aptInstall } from './apt.mjs'
import { hasProgram } from './run.mjs'
import { say } from './say.mjs'

/** Named alike: the program and Debian's package. */
const TOOLS = ['curl', 'python3']

/** See that curl and Python are there, from Debian's packages. */
export async function needTools(why, logFolder) {
  const missing = []
  for (const tool of TOOLS) if (!await hasProgram(tool)) missing.push(tool)
  if (!missing.length) return
  say(`Installing ${missing.join(' and ')} from Debian ...`)
  await aptInstall(missing, { why, logFolder })
}
