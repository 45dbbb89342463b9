let last: Promise<void> = Promise.resolve()

/** One piece of work after the other in this tab. */
function inTurn(work: () => Promise<void>): Promise<void> {
  last = last.then(work, work)
  return last
}

/**
 * One piece of work at a time among all tabs of this browser that use the name. Browsers give locks to pages on HTTPS and on
 * this machine only; elsewhere tabs may work at once, so the work must bear that.
 */
export async function exclusively(name: string, work: () => Promise<void>): Promise<void> {
  if (!('locks' in navigator)) return inTurn(work)
  let begun = false
  try {
    await navigator.locks.request(name, () => {
      begun = true
      return work()
    })
  } catch (cause) {
    // Some windows have no locks although the browser has.
    if (begun) throw cause
    return inTurn(work)
  }
}
