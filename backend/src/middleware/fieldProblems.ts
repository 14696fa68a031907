import type { FieldProblem } from '@maslin/shared'
import type { z } from 'zod'
import { AppError } from '../errors'

/** So many at most, so that a huge wrong request does not make a huge answer. */
const most = 100

/**
 * Reads input by its schema.
 * @param where prefix of the paths in the problem: `query` for a query, empty for a body
 * @throws AppError `invalid_input` with every field that is wrong
 */
export function readInput<Schema extends z.ZodType>(
  schema: Schema,
  input: unknown,
  where = '',
): z.output<Schema> {
  const parsed = schema.safeParse(input, { reportInput: true })
  if (parsed.success) return parsed.data
  const errors = parsed.error.issues.flatMap((issue) => toProblems(issue, where)).slice(0, most)
  throw new AppError('invalid_input', { errors })
}

function toProblems(issue: z.core.$ZodIssue, where: string): FieldProblem[] {
  const path = [...(where ? [where] : []), ...issue.path.map(String)]
  if (issue.code === 'unrecognized_keys') {
    return issue.keys.map((key) => ({
      path: [...path, key].join('.'),
      code: 'unknown_field',
      message: 'This field is not known here.',
    }))
  }
  return [{ path: path.join('.'), code: codeOf(issue), message: issue.message }]
}

function codeOf(issue: z.core.$ZodIssue): string {
  // A message that is one word is a code of our own schemas (`min_above_max`, `money`).
  if (/^[a-z][a-zA-Z_]*$/.test(issue.message)) return issue.message
  if (issue.input === undefined && (issue.code === 'invalid_type' || issue.code === 'invalid_value'))
    return 'required'
  switch (issue.code) {
    case 'invalid_type':
      return issue.expected === 'number' || issue.expected === 'int'
        ? 'not_a_number'
        : `not_a_${issue.expected}`
    case 'too_big':
      return 'too_large'
    case 'too_small':
      return issue.origin === 'string' && issue.input === '' ? 'required' : 'too_small'
    case 'invalid_value':
    case 'invalid_union':
    case 'invalid_key':
      return 'not_a_choice'
    case 'invalid_format':
      return `not_a_${issue.format}`
    default:
      return issue.code
  }
}
