/** Of the intake table: what the server renders first and the browser asks for must be the same page. */
export const FILES_PER_PAGE = 100
