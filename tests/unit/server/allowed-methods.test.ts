import { expect, it } from 'vitest'
import { allowedMethods } from '../../../server/utils/allowed-methods'

const routes = [
  { route: '/api/scenarios', method: 'post' }, { route: '/api/scenarios', method: 'get' },
  { route: '/api/scenarios/:id', method: 'delete' }, { route: '/api/**' },
]

it.each([
  ['/api/scenarios', ['GET', 'POST']],
  ['/api/scenarios/abc', ['DELETE']],
  ['/api/scenarios/', []],
  ['/api/scenarios/abc/links', []],
  ['/api/elsewhere', []],
])('%s takes %j', (path, methods) => {
  expect(allowedMethods(routes, path)).toEqual(methods)
})
