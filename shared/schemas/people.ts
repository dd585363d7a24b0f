import { z } from 'zod'
import { idSchema, nameSchema, ROLES } from './common'

const emailSchema = z.string().trim().toLowerCase().max(254).pipe(z.email('an e-mail address such as nell@lapwright.example'))
const passwordSchema = z.string().min(10, 'at least 10 characters').max(200, 'at most 200 characters')

export const registerBody = z.object({
  name: nameSchema,
  email: emailSchema,
  password: passwordSchema,
  teamName: nameSchema,
})

export const signInBody = z.object({
  email: emailSchema,
  password: z.string().min(1, 'please give your password').max(200),
})

export const changePasswordBody = z.object({
  currentPassword: z.string().min(1, 'please give your present password').max(200),
  newPassword: passwordSchema,
})

/** Who is signed in, and in which teams with which role. */
export const meSchema = z.object({
  id: idSchema,
  name: z.string(),
  email: z.string(),
  teams: z.array(z.object({ id: idSchema, name: z.string(), role: z.enum(ROLES) })),
})
export type Me = z.infer<typeof meSchema>

export const memberSchema = z.object({
  userId: idSchema,
  name: z.string(),
  role: z.enum(ROLES),
})
export type Member = z.infer<typeof memberSchema>
