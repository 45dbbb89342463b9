import { randomUUID } from 'node:crypto'
import { z } from 'zod'
import { log } from '@/lib/platform/log'
import { Problem } from '@/lib/platform/problems/problem'

/** RFC 9457. `type` is a stable URN, `detail` a sentence for people, `requestId` finds the line in the server's log. */
export function problemResponse(error: unknown, requestId: string = randomUUID()): Response {
  if (error instanceof z.ZodError) {
    const parameters = error.issues.map((issue) => ({ name: issue.path.join('.') || 'body', reason: issue.message }))
    const sentence = parameters.map(({ name, reason }) => `${name}: ${reason}`).join('; ')
    return problemResponse(
      new Problem(422, 'invalid', `What was sent cannot be used. ${sentence}`, parameters),
      requestId,
    )
  }
  if (error instanceof Problem) {
    return respond(requestId, error.status, error.type, error.message, error.invalidParameters)
  }
  log.error({ requestId, err: error }, 'request failed')
  const sentence = `Something went wrong on the server and nothing was changed. It is logged under ${requestId}; try again.`
  return respond(requestId, 500, 'internal', sentence)
}

function respond(
  requestId: string,
  status: number,
  type: string,
  detail: string,
  parameters: { name: string; reason: string }[] = [],
): Response {
  const body = {
    type: `urn:ringside:problem:${type}`,
    title: type.replaceAll('-', ' '),
    status,
    detail,
    requestId,
    ...(parameters.length ? { invalid_params: parameters } : {}),
  }
  return Response.json(body, {
    status,
    headers: { 'content-type': 'application/problem+json', 'x-request-id': requestId, 'cache-control': 'no-store' },
  })
}
