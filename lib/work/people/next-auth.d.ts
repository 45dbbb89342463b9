import 'next-auth'
import 'next-auth/jwt'

declare module 'next-auth' {
  interface User {
    epoch: number
  }
  interface Session {
    personId?: number
    epoch?: number
  }
}

declare module 'next-auth/jwt' {
  interface JWT {
    personId?: number
    epoch?: number
  }
}
