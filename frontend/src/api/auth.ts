import { sessionSchema, type Session, type SignIn, type SignUp } from '@maslin/shared'
import { get, post, requestNothing } from './client'

export const signUp = (body: SignUp): Promise<Session> => post('/auth/sign-up', sessionSchema, body)
export const signIn = (body: SignIn): Promise<Session> => post('/auth/sign-in', sessionSchema, body)
export const signOut = (): Promise<void> => requestNothing('POST', '/auth/sign-out')
export const fetchSession = (): Promise<Session> => get('/auth/session', sessionSchema)
