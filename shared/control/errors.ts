/** The input itself is wrong (400): names the field of the request body that must change. */
export class InvalidInputError extends Error {
  constructor(readonly path: string, message: string, readonly position?: number) {
    super(message)
    this.name = 'InvalidInputError'
  }
}

/** The input is well-formed but the mathematics has no answer (422): one sentence says why. */
export class NoAnswerError extends Error {
  constructor(message: string, readonly path?: string) {
    super(message)
    this.name = 'NoAnswerError'
  }
}

/** The answer would take more work than one request may: said at once, and never mistaken for an answer. */
export class TooMuchWorkError extends NoAnswerError {
  constructor(message: string, path?: string) {
    super(message, path)
    this.name = 'TooMuchWorkError'
  }
}
