/**
 * A refusal that a person can act on. Thrown by use cases and parsers, translated to HTTP (RFC 9457) or to a form's message
 * once, at the edge. `type` is stable and is what scripts may rely on; the sentence may be improved.
 */
export type ProblemStatus = 400 | 401 | 403 | 404 | 409 | 411 | 413 | 415 | 422 | 429 | 507

export class Problem extends Error {
  override name = 'Problem'
  constructor(
    readonly status: ProblemStatus,
    readonly type: string,
    message: string,
    readonly invalidParameters: { name: string; reason: string }[] = [],
    options?: ErrorOptions,
  ) {
    super(message, options)
  }
}

export const signInNeeded = () => new Problem(401, 'sign-in-needed', 'Sign in first, then try again.')

/**
 * Unknown and forbidden answer alike, so that nobody outside a campaign can learn by asking which campaigns, candidates or
 * files exist.
 */
export const notFound = (what: string) =>
  new Problem(
    404,
    'not-found',
    `There is no ${what} here that you may see. Check the address, or ask a lead to invite you.`,
  )

export const forbidden = (sentence: string) => new Problem(403, 'forbidden', sentence)
export const invalid = (sentence: string, parameters: { name: string; reason: string }[] = []) =>
  new Problem(422, 'invalid', sentence, parameters)
export const conflict = (type: string, sentence: string) => new Problem(409, type, sentence)
