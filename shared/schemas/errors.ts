/** One fault of a request: `path` is the field in dotted form; `position` a character of a formula, counted from 0. */
export interface Issue {
  path: string
  message: string
  position?: number
}

/** The body of every answer that is not a success. */
export interface ErrorBody {
  statusCode: number
  statusMessage: string
  message: string
  data?: { issues?: Issue[], current?: unknown }
}
