import type { LinearProgram, ProgramProblem } from './types'

type Where = ProgramProblem['where']

const isNumber = (value: unknown): value is number => typeof value === 'number' && !Number.isNaN(value)

/** What is wrong with one pair of bounds, if anything. */
function boundProblem(
  kind: Where['kind'],
  id: string,
  position: number,
  lower: number,
  upper: number,
): ProgramProblem | undefined {
  const where = (field: string): Where => ({ kind, id, position, field })
  if (!isNumber(lower))
    return {
      code: 'notANumber',
      where: where('lower'),
      message: `The lower limit of ${kind} ${id} is not a number.`,
    }
  if (!isNumber(upper))
    return {
      code: 'notANumber',
      where: where('upper'),
      message: `The upper limit of ${kind} ${id} is not a number.`,
    }
  if (lower === Infinity || upper === -Infinity)
    return {
      code: 'wrongInfinity',
      where: where(lower === Infinity ? 'lower' : 'upper'),
      message: `No amount can reach an infinite limit: ${kind} ${id} has lower ${lower} and upper ${upper}.`,
    }
  if (lower > upper)
    return {
      code: 'crossedBounds',
      where: where('lower'),
      message: `The lower limit ${lower} of ${kind} ${id} lies above its upper limit ${upper}.`,
    }
  return undefined
}

/** What is wrong with one coefficient of a row. */
function entryProblem(lp: LinearProgram, position: number, column: number, value: number): ProgramProblem {
  const { id } = lp.rows[position]!
  const where: Where = { kind: 'row', id, position, field: 'entries' }
  const name = lp.columns[column]?.id
  if (name === undefined)
    return {
      code: 'unknownColumn',
      where,
      message: `Row ${id} names column ${column}, but there are ${lp.columns.length} columns.`,
    }
  if (!isNumber(value))
    return { code: 'notANumber', where, message: `The coefficient of ${name} in row ${id} is not a number.` }
  if (!Number.isFinite(value))
    return {
      code: 'infiniteCoefficient',
      where,
      message: `The coefficient of ${name} in row ${id} is infinite.`,
    }
  return { code: 'repeatedColumn', where, message: `Row ${id} names column ${name} twice.` }
}

/**
 * Everything that keeps a program from being a linear program at all; empty when it is one. Engines accept some of
 * these in silence (an infinite cost, a NaN) and then answer nonsense, so nothing is handed on before this.
 */
export function findProblems(lp: LinearProgram): ProgramProblem[] {
  const problems: ProgramProblem[] = []
  const columnIds = new Set<string>()
  lp.columns.forEach((column, position) => {
    const { id } = column
    const at = (field: string): Where => ({ kind: 'column', id, position, field })
    if (columnIds.has(id))
      problems.push({ code: 'duplicateId', where: at('id'), message: `Two columns are called ${id}.` })
    columnIds.add(id)
    if (!isNumber(column.cost))
      problems.push({
        code: 'notANumber',
        where: at('cost'),
        message: `The cost of column ${id} is not a number.`,
      })
    else if (!Number.isFinite(column.cost))
      problems.push({
        code: 'infiniteCost',
        where: at('cost'),
        message: `The cost of column ${id} is infinite.`,
      })
    const bound = boundProblem('column', id, position, column.lower, column.upper)
    if (bound) problems.push(bound)
  })
  const rowIds = new Set<string>()
  const seenIn = new Int32Array(lp.columns.length).fill(-1)
  lp.rows.forEach((row, position) => {
    const { id } = row
    const at = (field: string): Where => ({ kind: 'row', id, position, field })
    if (rowIds.has(id))
      problems.push({ code: 'duplicateId', where: at('id'), message: `Two rows are called ${id}.` })
    rowIds.add(id)
    const bound = boundProblem('row', id, position, row.lower, row.upper)
    if (bound) problems.push(bound)
    for (const entry of row.entries) {
      const column = entry[0]
      const value = entry[1]
      // The usual case first: this loop sees every coefficient of every program.
      if (seenIn[column] !== position && column >= 0 && column < seenIn.length && value - value === 0) {
        seenIn[column] = position
        if (Number.isInteger(column)) continue
      }
      problems.push(entryProblem(lp, position, column, value))
    }
  })
  return problems
}
