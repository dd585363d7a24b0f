import { describe, expect, it } from 'vitest'
import { aptReason, lastWords, npmReason } from '../../../../scripts/lib/last-words.mjs'

describe('lastWords', () => {
  it('prefers the last line that names an error over what follows it', () => {
    expect(lastWords('reading\nerror: relation "cars" does not exist\n    at Parser (/x.js:1:2)\ndone\n'))
      .toBe('relation "cars" does not exist')
  })

  it('leaves out colours, boxes, stack lines and the version of Node', () => {
    expect(lastWords('\u001B[31mCannot find a file\u001B[0m\n  at a (b.js:1:1)\n{\n  code: \'X\'\n}\n\nNode.js v20.20.2\n'))
      .toBe('Cannot find a file')
  })

  it('takes the last line when none names an error, and says so when there is none', () => {
    expect(lastWords('one\ntwo.\n')).toBe('two')
    expect(lastWords('\n')).toBe('it said nothing')
  })

  it('is one line of at most 200 characters', () => {
    expect(lastWords(`error ${'long '.repeat(200)}`).length).toBeLessThanOrEqual(200)
  })
})

describe('npmReason', () => {
  it('names a registry that cannot be reached', () => {
    expect(npmReason('npm error code ECONNREFUSED\nnpm error syscall connect\nnpm error FetchError: request to http://127.0.0.1:9 failed\n'))
      .toBe('the package registry could not be reached (ECONNREFUSED)')
  })

  it('names a full disk', () => {
    expect(npmReason('npm error code ENOSPC\nnpm error syscall write\nnpm error nospc ENOSPC: no space left on device, write\n'))
      .toBe('the disk is full')
  })

  it('names a lock file that does not fit', () => {
    expect(npmReason('npm error code EUSAGE\nnpm error\nnpm error `npm ci` can only install packages when ...\n'))
      .toBe('package.json and package-lock.json do not agree')
  })

  it('otherwise gives npm\'s first sentence without its codes', () => {
    expect(npmReason('npm error code E404\nnpm error 404 Not Found - GET http://r/x\nnpm error A complete log of this run\n'))
      .toBe('404 Not Found - GET http://r/x')
  })
})

describe('aptReason', () => {
  it('gives the first line marked as an error', () => {
    expect(aptReason('Reading package lists...\nE: Unable to locate package postgresql\nE: Broken packages\n'))
      .toBe('Unable to locate package postgresql')
  })

  it('names an archive that cannot be reached, which apt-get only warns of', () => {
    expect(aptReason('W: Failed to fetch http://a/b  Unable to connect to a:80:\nE: Unable to locate package postgresql\n'))
      .toBe('the Debian archive could not be reached')
  })

  it('names a full disk', () => {
    expect(aptReason('E: You don\'t have enough free space in /var/cache/apt/archives/.\n')).toBe('the disk is full')
  })
})
