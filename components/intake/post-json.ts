/** The sentence of what went wrong, or null. */
export async function postJson(address: string, body: object): Promise<string | null> {
  const response = await fetch(address, {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify(body),
  }).catch(() => null)
  if (response?.ok) return null
  const answer = (await response?.json().catch(() => null)) as { detail?: unknown } | null | undefined
  return typeof answer?.detail === 'string'
    ? answer.detail
    : 'That did not reach the server. Nothing was changed; try again.'
}
