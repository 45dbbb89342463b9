/** Set by proxy.ts on requests for pages: path and query as the visitor asked for them. */
export const ASKED_PATH_HEADER = 'x-ringside-asked-path'
