/** The person who asks, as far as pages and use cases need to know them. */
export interface Viewer {
  readonly id: number
  readonly name: string
  readonly email: string
  readonly isAdmin: boolean
}
