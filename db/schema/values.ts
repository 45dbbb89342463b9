/** SQLite's truth in types: there is no boolean, no date and no JSON, so say what the text and the integers mean. */
export type Flag = 0 | 1

/** UTC, `2026-12-01T11:19:04.000Z`. Text order is time order. */
export type IsoTime = string

/** JSON text whose parsed shape is T; made by `toJson`, read by `fromJson`. */
export type Json<T> = string & { readonly __json?: T }

export function toJson<T>(value: T): Json<T> {
  return JSON.stringify(value) as Json<T>
}

export function fromJson<T>(text: Json<T>): T {
  return JSON.parse(text) as T
}
