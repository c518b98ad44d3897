import { signInBodySchema } from '#shared/schemas/account'
import { userByEmail } from '../../database/queries/users'
import { publicUser, signIn } from '../../utils/auth'
import { readValidated } from '../../utils/body'
import { failure } from '../../utils/errors'
import { callerAddress, forgiveSignIn, limitSignIn } from '../../utils/limits'

/** A hash that no password meets: an unknown account costs the same work as a wrong password. */
let decoy: Promise<string> | undefined

export default defineEventHandler(async (event) => {
  const { email, password } = await readValidated(event, signInBodySchema)
  await limitSignIn(event, email)
  const user = userByEmail(email)
  decoy ??= hashPassword(crypto.randomUUID())
  const right = await verifyPassword(user?.passwordHash ?? await decoy, password)
  if (user === undefined || !right || user.disabledAt !== null) {
    console.warn('[sign-in refused]', callerAddress(event))
    throw failure(401, 'The address and the password do not belong together.')
  }
  await forgiveSignIn(event, email)
  await signIn(event, user)
  console.info('[sign-in]', callerAddress(event))
  return { user: publicUser(user) }
})
