export interface Answer<T = unknown> {
  status: number
  headers: Headers
  body: T
}

/** A caller with a cookie jar, for tests of the interface. */
export class Client {
  private readonly cookies = new Map<string, string>()

  constructor(readonly origin: string) {}

  get cookie(): string {
    return [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
  }

  async send<T = unknown>(method: string, path: string, body?: unknown, headers: Record<string, string> = {}): Promise<Answer<T>> {
    return this.raw(method, path, body === undefined ? undefined : JSON.stringify(body), {
      ...(body === undefined ? {} : { 'content-type': 'application/json' }), ...headers,
    })
  }

  async raw<T>(method: string, path: string, body: string | undefined, headers: Record<string, string> = {}): Promise<Answer<T>> {
    const response = await fetch(this.origin + path, { method, body, headers: { cookie: this.cookie, ...headers }, redirect: 'manual' })
    for (const line of response.headers.getSetCookie()) {
      const [pair = ''] = line.split(';')
      const [name = '', value = ''] = [pair.slice(0, pair.indexOf('=')), pair.slice(pair.indexOf('=') + 1)]
      if (value === '') this.cookies.delete(name)
      else this.cookies.set(name, value)
    }
    const text = await response.text()
    return { status: response.status, headers: response.headers, body: (text === '' ? null : parse(text)) as T }
  }

  get = <T = unknown>(path: string) => this.send<T>('GET', path)
  post = <T = unknown>(path: string, body: unknown = {}) => this.send<T>('POST', path, body)
  patch = <T = unknown>(path: string, body: unknown) => this.send<T>('PATCH', path, body)
  delete = <T = unknown>(path: string) => this.send<T>('DELETE', path)
}

function parse(text: string): unknown {
  try {
    return JSON.parse(text)
  } catch {
    return text
  }
}

let people = 0

/** A freshly registered person, signed in. */
export async function register(origin: string, name = 'Runa Holt'): Promise<Client & { email: string, password: string }> {
  people += 1
  const client = new Client(origin)
  const account = { name, email: `person${people}.${process.pid}@example.org`, password: 'a long enough secret' }
  const answer = await client.post('/api/auth/register', account)
  if (answer.status !== 201) throw new Error(`Registering failed: ${JSON.stringify(answer.body)}`)
  return Object.assign(client, account)
}
