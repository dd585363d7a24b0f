import { describe, expect, it } from 'vitest'
import { countReport, PARTS, partsAsked, sumUp } from '../../../../scripts/lib/test-parts.mjs'

describe('partsAsked', () => {
  it('means all parts when none is named', () => {
    expect(partsAsked([])).toEqual({ parts: PARTS, files: [], unknown: [] })
  })

  it('keeps the order of the parts and tells files from parts', () => {
    expect(partsAsked(['api', 'unit', 'tests/api/x.spec.ts', 'soup']))
      .toEqual({ parts: ['unit', 'api'], files: ['tests/api/x.spec.ts'], unknown: ['soup'] })
  })
})

describe('countReport', () => {
  it('counts a file that could not be read into tests as one failure', () => {
    const report = {
      numPassedTests: 3, numFailedTests: 1, numPendingTests: 2,
      testResults: [
        { status: 'failed', assertionResults: [{ status: 'passed' }, { status: 'failed' }] },
        { status: 'failed', assertionResults: [] },
        { status: 'passed', assertionResults: [{ status: 'passed' }] },
      ],
    }
    expect(countReport(report)).toEqual({ passed: 3, failed: 2, skipped: 2 })
  })
})

describe('sumUp', () => {
  it('never says 0 failed when a part failed', () => {
    expect(sumUp([{ ok: true, passed: 5, failed: 0 }, { ok: false }])).toEqual({ passed: 5, failed: 1 })
    expect(sumUp([{ ok: false, passed: 5, failed: 0 }])).toEqual({ passed: 5, failed: 1 })
    expect(sumUp([{ ok: false, passed: 5, failed: 2 }])).toEqual({ passed: 5, failed: 2 })
  })
})
