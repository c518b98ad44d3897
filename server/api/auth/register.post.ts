import { registerBodySchema } from '#shared/schemas/account'
import { registerUser } from '../../database/queries/users'
import { publicUser, signIn } from '../../utils/auth'
import { readValidated } from '../../utils/body'
import { failure } from '../../utils/errors'
import { limit } from '../../utils/limits'
import { refuseCommonPassword } from '../../utils/passwords'

export default defineEventHandler(async (event) => {
  await limit(event, 'register')
  const { name, email, password } = await readValidated(event, registerBodySchema)
  refuseCommonPassword(password, { name, email })
  const user = registerUser({ name, email, passwordHash: await hashPassword(password) })
  if (user === undefined) {
    const message = 'there is an account with this address already; sign in instead'
    throw failure(400, `email: ${message}`, { issues: [{ path: 'email', message }] })
  }
  await signIn(event, user)
  setResponseStatus(event, 201)
  return { user: publicUser(user) }
})
