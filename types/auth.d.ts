declare module '#auth-utils' {
  interface User {
    id: string
  }
  interface UserSession {
    /** `users.session_epoch` at sign-in; an older one than the database's has ended. */
    epoch?: number
  }
}

export {}
