/** What a candidate is called to whom its name is not told: its number, as in the address of its page. Pure. */
export const candidateNumber = (id: number): string => `No. ${id}`
