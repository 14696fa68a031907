import { z } from 'zod'

/**
 * Every way a request can fail, as a stable code. The page translates by code; the API answers RFC 9457 problem details.
 */
export const problemCodes = {
  invalid_input: 400,
  malformed_json: 400,
  not_signed_in: 401,
  wrong_sign_in: 401,
  session_ended: 401,
  not_allowed: 403,
  origin_refused: 403,
  not_found: 404,
  method_not_allowed: 405,
  conflict: 409,
  email_taken: 409,
  already_member: 409,
  name_taken: 409,
  in_use: 409,
  last_owner: 409,
  stale_version: 409,
  wrong_state: 409,
  idempotency_mismatch: 409,
  nothing_to_apply: 409,
  version_required: 412,
  too_large: 413,
  unsupported_type: 415,
  unreadable_file: 422,
  missing_price: 422,
  too_many_requests: 429,
  internal_error: 500,
  /** What is stored no longer matches its hash. */
  damaged_record: 500,
  busy: 503,
  not_ready: 503,
  deadline_passed: 503,
} as const
export type ProblemCode = keyof typeof problemCodes

export const fieldProblemSchema = z.object({
  /** Where: the path inside the request, for example `feeds.2.values.calcium`. */
  path: z.string(),
  /** What is wrong, as a stable code (`required`, `too_small`, `not_a_number`, …). */
  code: z.string(),
  message: z.string(),
})
export type FieldProblem = z.infer<typeof fieldProblemSchema>

/** RFC 9457 problem details, with our stable `code`, the request's id and messages per field. */
export const problemSchema = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  code: z.string(),
  detail: z.string().optional(),
  requestId: z.string().optional(),
  errors: z.array(fieldProblemSchema).optional(),
  /** With `stale_version`: the row as it stands now. */
  current: z.unknown().optional(),
})
export type Problem = z.infer<typeof problemSchema>
