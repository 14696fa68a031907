import { z } from 'zod'
import { idSchema, nameSchema, timestampSchema, versionSchema } from './common'
import { currencySchema } from './money'
import { roles } from './permissions'

export const roleSchema = z.enum(roles)
export const emailSchema = z.string().trim().toLowerCase().max(254).pipe(z.email())
/** Length counts, not signs of four kinds; paste is welcome. */
export const passwordSchema = z.string().min(10).max(200)

export const unitSystemSchema = z.enum(['us', 'metric'])
export type UnitSystem = z.infer<typeof unitSystemSchema>

export const signUpSchema = z.strictObject({
  name: nameSchema,
  email: emailSchema,
  password: passwordSchema,
  farmName: nameSchema,
  units: unitSystemSchema.default('us'),
  currency: currencySchema.default('USD'),
})
export type SignUp = z.input<typeof signUpSchema>

export const signInSchema = z.strictObject({ email: emailSchema, password: z.string().min(1).max(200) })
export type SignIn = z.input<typeof signInSchema>

export const farmSchema = z.object({
  id: idSchema,
  name: nameSchema,
  units: unitSystemSchema,
  currency: currencySchema,
  version: versionSchema,
  updatedAt: timestampSchema,
})
export type Farm = z.infer<typeof farmSchema>

export const farmUpdateSchema = z.strictObject({
  name: nameSchema.optional(),
  units: unitSystemSchema.optional(),
  /** Only while the farm has no prices: a price keeps the currency it was given in. */
  currency: currencySchema.optional(),
})
export type FarmUpdate = z.infer<typeof farmUpdateSchema>

export const membershipSchema = z.object({ farm: farmSchema, role: roleSchema })
export type Membership = z.infer<typeof membershipSchema>

/** Who is signed in, and where they may go. */
export const sessionSchema = z.object({
  user: z.object({ id: idSchema, name: nameSchema, email: z.string() }),
  memberships: z.array(membershipSchema),
})
export type Session = z.infer<typeof sessionSchema>

export const memberSchema = z.object({
  id: idSchema,
  userId: idSchema,
  name: nameSchema,
  email: z.string(),
  role: roleSchema,
  version: versionSchema,
  createdAt: timestampSchema,
})
export type Member = z.infer<typeof memberSchema>

export const memberCreateSchema = z.strictObject({ email: emailSchema, role: roleSchema })
export type MemberCreate = z.input<typeof memberCreateSchema>
export const memberUpdateSchema = z.strictObject({ role: roleSchema })
