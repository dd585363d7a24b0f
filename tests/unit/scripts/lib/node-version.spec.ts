import { describe, expect, it } from 'vitest'
import { nodeComplaint } from '../../../../scripts/lib/node-version.mjs'

describe('nodeComplaint', () => {
  it.each(['20.19.0', '20.20.2', '22.0.0', '24.1.0'])('takes %s', (version) => {
    expect(nodeComplaint(version)).toBe('')
  })

  it.each(['20.18.9', '18.20.4', '12.22.12'])('refuses %s in one sentence that names both versions', (version) => {
    const sentence = nodeComplaint(version)
    expect(sentence).toContain('20.19')
    expect(sentence).toContain(version)
    expect(sentence).not.toContain('\n')
  })
})
