import { z } from 'zod'
import { limits } from './limits'
import { visibleName } from './text'

const email = z.string().trim().toLowerCase().max(limits.email).pipe(z.email('this is not an e-mail address'))
const password = z.string()
  .min(limits.password.least, `a password has at least ${limits.password.least} characters`)
  .max(limits.password.most, `a password has at most ${limits.password.most} characters`)
  .refine(password => password.trim() !== '', 'a password is more than blanks')

export const registerBodySchema = z.strictObject({
  name: visibleName(limits.name, 'tell colleagues who you are'),
  email,
  password,
})

export const signInBodySchema = z.strictObject({ email, password: z.string().min(1, 'type your password').max(limits.password.most) })

export type RegisterBody = z.infer<typeof registerBodySchema>
export type SignInBody = z.infer<typeof signInBodySchema>
