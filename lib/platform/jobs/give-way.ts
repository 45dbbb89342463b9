/** Between two pieces of a long work: whatever has come in meanwhile has its turn. */
export const giveWay = (): Promise<void> => new Promise((resolve) => setImmediate(resolve))
