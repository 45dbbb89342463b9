import 'server-only'
import type { NextAuthOptions } from 'next-auth'
import CredentialsProvider from 'next-auth/providers/credentials'
import { database } from '@/lib/platform/database'
import { authSecret } from './auth-secret'
import { findPersonBySecret } from './sign-in'

/** JWT sessions: next-auth's database sessions do not work with credentials. The epoch lets an account end its sessions. */
export function authOptions(): NextAuthOptions {
  return {
    secret: authSecret(),
    session: { strategy: 'jwt', maxAge: 30 * 24 * 3600 },
    pages: { signIn: '/signin', error: '/signin' },
    providers: [
      CredentialsProvider({
        name: 'E-mail and password',
        credentials: { email: { label: 'E-mail', type: 'email' }, password: { label: 'Password', type: 'password' } },
        async authorize(credentials) {
          if (!credentials?.email || !credentials.password) return null
          const person = await findPersonBySecret(await database(), credentials.email, credentials.password)
          if (!person) return null
          return { id: String(person.id), name: person.name, email: person.email, epoch: person.session_epoch }
        },
      }),
    ],
    callbacks: {
      jwt({ token, user }) {
        return user ? { ...token, personId: Number(user.id), epoch: user.epoch } : token
      },
      session({ session, token }) {
        return { ...session, personId: token.personId, epoch: token.epoch }
      },
    },
  }
}
