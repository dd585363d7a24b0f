// Kept in syntax that an old Node can read, because it has to say that Node is too old.

export const NEEDED_NODE = [20, 19]

/** The sentence for a Node that is too old, or an empty text. */
export function nodeComplaint(version) {
  const [major, minor] = version.split('.').map(Number)
  const [needMajor, needMinor] = NEEDED_NODE
  if (major > needMajor || (major === needMajor && minor >= needMinor)) return ''
  return `Lapwright needs Node ${needMajor}.${needMinor} or newer and this is Node ${version}: `
    + 'install a newer Node (https://nodejs.org) and try again.'
}

/** Ends the process with a sentence when Node is too old. */
export function requireNode() {
  const complaint = nodeComplaint(process.versions.node)
  if (!complaint) return
  process.stderr.write(`${complaint}\n`)
  process.exit(1)
}
