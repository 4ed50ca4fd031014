// The sign-in module's types import next-auth, which we do not use: these stand in its place.
declare module 'next-auth' {
  interface Session {
    expires: string
    user?: { id: string, name: string, email: string, roles: ('student' | 'instructor' | 'admin' | 'safety')[], unit: 'mm' | 'in', places: string[] }
  }
  export type { Session }
  export type AuthOptions = Record<string, unknown>
}
declare module 'next-auth/jwt' {
  export type JWT = Record<string, unknown>
}
declare module 'next-auth/providers/index' {
  export type BuiltInProviderType = string
}
