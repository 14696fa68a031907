import { limitSchema, offerCreateSchema } from '@maslin/shared'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { AppError } from '../errors'
import { readInput } from './fieldProblems'

function problemsOf(schema: z.ZodType, input: unknown, where?: string) {
  try {
    readInput(schema, input, where)
  } catch (error) {
    if (error instanceof AppError) return error.errors?.map(({ path, code }) => `${path}: ${code}`)
    throw error
  }
  return []
}

describe('what is wrong with input', () => {
  const schema = z.strictObject({
    name: z.string().min(1),
    heads: z.number().int().min(1).max(9),
    kind: z.enum(['a', 'b']),
    day: z.iso.date(),
    list: z
      .array(z.strictObject({ id: z.uuid() }))
      .max(3)
      .optional(),
  })

  it.each([
    { given: {}, codes: ['name: required', 'heads: required', 'kind: required', 'day: required'] },
    {
      given: { name: '', heads: 'many', kind: 'c', day: 'soon' },
      codes: ['name: required', 'heads: not_a_number', 'kind: not_a_choice', 'day: not_a_date'],
    },
    {
      given: { name: 'x', heads: 1, kind: 'a', day: '2026-01-01', list: [1, 2, 3, 4] },
      codes: ['list: too_large'],
    },
    { given: { name: 'x', heads: 0, kind: 'a', day: '2026-01-01' }, codes: ['heads: too_small'] },
    { given: { name: 'x', heads: Infinity, kind: 'a', day: '2026-01-01' }, codes: ['heads: not_a_number'] },
    {
      given: {
        name: 'x',
        heads: 1,
        kind: 'a',
        day: '2026-01-01',
        list: [{ id: '1' }, { id: null }, {}],
        hue: 1,
        tone: 2,
      },
      codes: [
        'list.0.id: not_a_uuid',
        'list.1.id: not_a_string',
        'list.2.id: required',
        'hue: unknown_field',
        'tone: unknown_field',
      ],
    },
  ])('is named field by field: $codes', ({ given, codes }) =>
    expect(problemsOf(schema, given)?.sort()).toEqual(codes.sort()),
  )

  it('uses the codes of our own schemas', () => {
    const limit = { id: 'a', kind: 'intake', min: 3, max: 2 }
    expect(problemsOf(limitSchema, limit)).toEqual(['max: min_above_max'])
    expect(problemsOf(limitSchema, { ...limit, kind: 'colour' })).toEqual(['kind: not_a_choice'])
    expect(problemsOf(offerCreateSchema.pick({ price: true }), { price: '1e3' })).toEqual(['price: money'])
  })

  it('stands under the part of the request it is in', () =>
    expect(problemsOf(z.object({ asOf: z.iso.date() }), { asOf: 'x' }, 'query')).toEqual([
      'query.asOf: not_a_date',
    ]))

  it('is a list that ends, however much is wrong', () =>
    expect(problemsOf(z.array(z.number()), Array(5000).fill('x'))).toHaveLength(100))
})
