import { notFound } from '../utils/errors'

export default defineEventHandler(() => {
  throw notFound('There is no such address or method in this interface.')
})
