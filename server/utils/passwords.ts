import { failure } from './errors'

/** The commonest choices of at least eight characters (after case folding); from general knowledge, no list was copied. */
const common = new Set([
  'password', 'password1', 'password12', 'password123', 'passw0rd', '12345678', '123456789', '1234567890', '87654321', '11111111', '00000000',
  'qwertyui', 'qwertyuiop', 'qwerty123', 'asdfghjk', 'asdfasdf', 'zxcvbnm1', 'iloveyou', 'sunshine', 'princess', 'football', 'baseball',
  'superman', 'trustno1', 'letmein1', 'welcome1', 'welcome123', 'changeme', 'administrator', 'admin123', 'admin1234', 'abcd1234', 'abc12345',
  '1q2w3e4r', '1qaz2wsx', 'q1w2e3r4', 'computer', 'internet', 'whatever', 'starwars', 'michelle', 'jennifer', 'polewright', 'controls',
])

/** Refuses the commonest passwords and the person's own address or name. */
export function refuseCommonPassword(password: string, person: { name: string, email: string }) {
  const folded = password.toLowerCase()
  const own = [person.email, person.email.split('@')[0], person.name.toLowerCase()]
  if (!common.has(folded) && !own.includes(folded)) return
  const message = 'this password is among the first that anyone would try; choose another'
  throw failure(400, `password: ${message}`, { issues: [{ path: 'password', message }] })
}
