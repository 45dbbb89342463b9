/** What a grader may say they saw, in the order in which it is offered: kinds of lens first, then what is taken for one. */
export const TAGS = [
  'arc',
  'ring',
  'two images',
  'four images',
  'lensing group',
  'spiral',
  'ring galaxy',
  'merger',
  'edge-on disc',
  'star',
  'artefact',
] as const
export type Tag = (typeof TAGS)[number]

/** Why a picture cannot be judged. */
export const CANNOT_JUDGE_REASONS = ['no data', 'too faint', 'covered by an artefact', 'off the picture'] as const
export type CannotJudgeReason = (typeof CANNOT_JUDGE_REASONS)[number]
