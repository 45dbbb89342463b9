/**
 * Does `work` for every item, `lanes` at a time, in order of their beginning. After a failure nothing more is begun; what is under
 * way is waited for, and then the first failure is thrown.
 */
export async function inLanes<T>(lanes: number, items: readonly T[], work: (item: T) => Promise<void>): Promise<void> {
  let next = 0
  const failures: unknown[] = []
  const lane = async () => {
    while (next < items.length && failures.length === 0) {
      try {
        await work(items[next++])
      } catch (error) {
        failures.push(error)
      }
    }
  }
  await Promise.all(Array.from({ length: lanes }, lane))
  if (failures.length > 0) throw failures[0]
}
