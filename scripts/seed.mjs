import { discussion, scenarios } from './seed/scenarios.mjs'

/** An invented team for trying the product out; nothing of it leaves the machine that it runs on. */
const account = { name: 'Imke Daal', email: 'imke@demo.example', password: 'brass on paper' }

/**
 * Fills a running server with a demo team, through the product's own interface: an account, scenarios, one share link, comments.
 * A second run changes nothing and answers the same.
 * @param {string} origin such as http://localhost:3000
 * @returns {Promise<{ email: string, password: string, shareUrl: string | undefined }>}
 */
export async function seed(origin) {
  const owner = caller(origin)
  const registered = await owner.post('/api/auth/register', account, [201, 400])
  const { email, password } = account
  if (registered.statusCode === 400) await owner.post('/api/auth/sign-in', { email, password })
  else await fill(origin, owner)
  return { email, password, shareUrl: await existingLink(origin, owner) }
}

async function fill(origin, owner) {
  let shared
  for (const scenario of scenarios) shared = await owner.post('/api/scenarios', scenario)
  const link = await owner.post(`/api/scenarios/${shared.id}/links`, { permission: 'comment' })
  for (const { guest, comment, reply, resolved } of discussion) {
    const { id } = await caller(origin).post(`/api/shared/${link.token}/comments`, { ...comment, name: guest })
    if (reply !== undefined) await owner.post(`/api/scenarios/${shared.id}/comments`, { body: reply, parentId: id })
    if (resolved) await owner.send('PATCH', `/api/scenarios/${shared.id}/comments/${id}`, { resolved })
  }
}

/** The demo link, as long as nobody deleted the scenario or revoked the link. */
async function existingLink(origin, owner) {
  const { scenarios: [scenario] } = await owner.send('GET', `/api/scenarios?search=${encodeURIComponent(scenarios.at(-1).title)}`)
  if (scenario === undefined) return undefined
  const { links } = await owner.send('GET', `/api/scenarios/${scenario.id}/links`)
  return links[0] && `${origin}/s/${links[0].token}`
}

/** Speaks to the server as one person: keeps the session cookie, throws at any status but those expected. */
function caller(origin) {
  let cookie = ''
  async function send(method, path, body, expected = [200, 201]) {
    const response = await fetch(origin + path, {
      method, headers: { cookie, ...(body === undefined ? {} : { 'content-type': 'application/json' }) }, body: body && JSON.stringify(body),
    })
    const [set] = response.headers.getSetCookie()
    if (set !== undefined) cookie = set.split(';')[0]
    const answer = await response.json()
    if (!expected.includes(response.status)) throw new Error(`${method} ${path} answered ${response.status}: ${answer.message}`)
    return answer
  }
  return { send, post: (path, body, expected) => send('POST', path, body, expected) }
}
