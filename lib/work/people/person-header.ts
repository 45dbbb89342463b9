/**
 * The header by which a page says whose page it is. Another tab can sign somebody else in while it stays open, and what it
 * sends must not be taken for theirs. Scripts may leave it out.
 */
export const PERSON_HEADER = 'ringside-person'
