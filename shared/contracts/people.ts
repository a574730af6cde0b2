import { z } from 'zod'
import { Role } from './names'

/** Sign-in: e-mail and password as typed; nothing is cut off. */
export const SignIn = z.strictObject({
  email: z.string().trim().min(3).max(254),
  password: z.string().min(1).max(1024),
})
export type SignIn = z.output<typeof SignIn>

export const Me = z.strictObject({ name: z.string(), email: z.string(), role: Role })
export type Me = z.output<typeof Me>
