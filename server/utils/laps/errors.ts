/**
 * The one error of the pipeline: pure code throws it, the route wrapper and the worker alone know what to make of it.
 */
export class LapsError extends Error {
  readonly code: string
  /** Line of the file, counted from 1, where one line is to blame. */
  readonly row: number | undefined

  constructor(code: string, message: string, row?: number) {
    super(message)
    this.name = 'LapsError'
    this.code = code
    this.row = row
  }
}
