declare module '#auth-utils' {
  interface User {
    id: string
    name: string
    /** The account's session epoch when this cookie was made. */
    epoch: number
  }
}

export {}
