import { z } from 'zod'
import { contract, Id, idParams, listOf, pageQuery, Role, text } from './contract.ts'

export const User = z.object({
  id: Id,
  name: z.string(),
  email: z.string(),
  staffCode: z.string(),
  role: Role,
  /** Rooms this person works in; null is every room. */
  roomIds: z.array(Id).nullable(),
})
export type User = z.infer<typeof User>

/** A person as the administrator's form sees them. */
export const UserRecord = User.extend({ retired: z.boolean() })
export type UserRecord = z.infer<typeof UserRecord>

export const password = z.string().min(8, 'at least 8 characters').max(200, 'at most 200 characters')

export const SignInBody = z
  .strictObject({
    email: z.string().trim().max(200).optional(),
    staffCode: z.string().trim().max(32).optional(),
    password: z.string().max(200),
  })
  .refine((b) => Boolean(b.email) !== Boolean(b.staffCode), {
    path: ['email'],
    message: 'give the e-mail or the staff code',
  })

const SessionAnswer = z.object({
  user: User.nullable(),
  /** Raised when rights change; a phone drops what it cached when it differs. */
  authzVersion: z.number().int().optional(),
})

export const signIn = contract({
  method: 'POST',
  path: '/session',
  summary: 'Sign in by e-mail or staff code',
  allow: 'anyone',
  body: SignInBody,
  answer: SessionAnswer,
  status: 201,
})
export const readSession = contract({
  method: 'GET',
  path: '/session',
  summary: 'Who is signed in',
  allow: 'anyone',
  answer: SessionAnswer,
})
export const signOut = contract({ method: 'DELETE', path: '/session', summary: 'Sign out', allow: 'anyone' })

export const changePassword = contract({
  method: 'POST',
  path: '/session/password',
  summary: 'Change the own password; ends every other session',
  allow: 'signed-in',
  body: z.strictObject({ currentPassword: z.string().max(200), newPassword: password }),
})
export const askReset = contract({
  method: 'POST',
  path: '/password-resets',
  summary: 'Ask for a link to set a new password; always answers the same',
  allow: 'anyone',
  body: z.strictObject({ email: z.string().trim().min(3).max(200) }),
  status: 202,
  answer: z.object({ detail: z.string() }),
})
export const useReset = contract({
  method: 'POST',
  path: '/password-resets/:token',
  summary: 'Set a new password by the mailed link',
  allow: 'anyone',
  params: z.object({ token: z.string().min(20).max(100) }),
  body: z.strictObject({ newPassword: password }),
})

const userFields = {
  name: text(120),
  email: z.email('not an e-mail address').max(200),
  staffCode: z
    .string()
    .trim()
    .regex(/^[A-Za-z0-9-]{2,32}$/, 'use letters, digits and hyphen, 2 to 32'),
  role: Role,
  roomIds: z.array(Id).max(500).nullable(),
}
export const listUsers = contract({
  method: 'GET',
  path: '/users',
  summary: 'People',
  allow: ['administrator'],
  query: z.object({ ...pageQuery, q: z.string().max(100).optional(), retired: z.enum(['yes', 'no']).default('no') }),
  answer: listOf(UserRecord),
})
export const createUser = contract({
  method: 'POST',
  path: '/users',
  summary: 'Add a person',
  allow: ['administrator'],
  body: z.strictObject({ ...userFields, password }),
  answer: UserRecord,
  status: 201,
})
export const updateUser = contract({
  method: 'PATCH',
  path: '/users/:id',
  summary: 'Change, retire or bring back a person',
  allow: ['administrator'],
  params: idParams,
  body: z.strictObject({ ...userFields, password, retired: z.boolean() }).partial(),
  answer: UserRecord,
})
