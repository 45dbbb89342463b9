/** Runs once in each server process, before the first request. */
export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME === 'nodejs') {
    const { startServer } = await import('./lib/work/start-server')
    await startServer()
  }
}
