import { execFile } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { readFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { promisify } from 'node:util'
import { afterAll } from 'vitest'
import type { LinearProgram } from '@maslin/solver'

/**
 * GLPK's `glpsol` as an outside reference, by its own plain-text formats (GLPK reference manual, appendix "GLPK LP/MIP
 * format"): `--wglp` and `--glp` for problems, `-w` for solutions, all with 15 digits.
 */

const run = promisify(execFile)

/** Fails with what to do where GLPK is missing: a comparison that is skipped compares nothing. */
export async function requireGlpsol(): Promise<void> {
  try {
    await run('glpsol', ['--version'])
  } catch {
    throw new Error(
      'These tests compare with GLPK, which is not here. Install it: apt-get install -y glpk-utils',
    )
  }
}

export interface GlpkSolution {
  status: 'optimal' | 'infeasible' | 'unbounded' | 'other'
  objective: number
  rows: { status: string; activity: number; dual: number }[]
  columns: { status: string; value: number; reducedCost: number }[]
}

export interface GlpkProblem {
  lp: LinearProgram
  /** The file's own sense; `lp` always minimises, its costs negated where the file maximises. */
  maximises: boolean
  /** Added to the objective of `lp` (in the file's sense). */
  constant: number
}

const folder = mkdtempSync(path.join(tmpdir(), 'glpk-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))
let files = 0

/** A fresh file name in a folder that goes when the tests of the file that imports this are done. */
const scratch = (): string => path.join(folder, `${files++}`)

/** Lets glpsol read a problem file (`['-m', file]` or `['--mps', file]`) and returns what it read. */
export async function readProblem(args: string[]): Promise<GlpkProblem> {
  const file = scratch()
  await run('glpsol', [...args, '--check', '--wglp', file])
  return parseProblem(await readFile(file, 'utf8'))
}

/** Solves what glpsol reads itself from a problem file. */
export async function solveFile(args: string[]): Promise<GlpkSolution> {
  const file = scratch()
  await run('glpsol', [...args, '--nopresol', '-w', file])
  return parseSolution(await readFile(file, 'utf8'))
}

interface Asked {
  file: string
  resolve: (solution: GlpkSolution) => void
  reject: (error: unknown) => void
}

const asked: Asked[] = []
let running = false

/**
 * Solves a program of ours with glpsol (presolve off, so that it says which of infeasible and unbounded). Programs
 * asked for while others are being solved go together in one run of the shell: starting a process from Node costs
 * more than solving a mix.
 */
export async function solveWithGlpsol(lp: LinearProgram): Promise<GlpkSolution> {
  const file = scratch()
  writeFileSync(file, formatProblem(lp))
  return new Promise((resolve, reject) => {
    asked.push({ file, resolve, reject })
    if (!running) {
      running = true
      setImmediate(() => void solveAsked())
    }
  })
}

const EACH = 'for file; do glpsol --glp "$file" --nopresol -w "$file.solution" > "$file.log" || exit 1; done'

async function solveAsked(): Promise<void> {
  while (asked.length > 0) {
    const batch = asked.splice(0, 500)
    try {
      await run('sh', ['-c', EACH, 'sh', ...batch.map(({ file }) => file)])
      for (const { file, resolve } of batch) resolve(parseSolution(readFileSync(`${file}.solution`, 'utf8')))
    } catch (error) {
      for (const { reject } of batch) reject(error)
    }
  }
  running = false
}

function bounds(lower: number, upper: number): string {
  if (lower === upper) return `s ${lower}`
  if (lower > -Infinity && upper < Infinity) return `d ${lower} ${upper}`
  if (lower > -Infinity) return `l ${lower}`
  return upper < Infinity ? `u ${upper}` : 'f'
}

function readBounds([type, first, second]: string[]): { lower: number; upper: number } {
  switch (type) {
    case 's':
      return { lower: Number(first), upper: Number(first) }
    case 'd':
      return { lower: Number(first), upper: Number(second) }
    case 'l':
      return { lower: Number(first), upper: Infinity }
    case 'u':
      return { lower: -Infinity, upper: Number(first) }
    case 'f':
      return { lower: -Infinity, upper: Infinity }
    default:
      throw new Error(`GLPK wrote an unknown bound type: ${type}`)
  }
}

function formatProblem(lp: LinearProgram): string {
  const coefficients = lp.rows.flatMap((row, i) =>
    row.entries.map(([j, value]) => `a ${i + 1} ${j + 1} ${value}`),
  )
  return [
    `p lp min ${lp.rows.length} ${lp.columns.length} ${coefficients.length}`,
    ...lp.rows.map((row, i) => `i ${i + 1} ${bounds(row.lower, row.upper)}`),
    ...lp.columns.map((column, j) => `j ${j + 1} ${bounds(column.lower, column.upper)}`),
    ...lp.columns.flatMap((column, j) => (column.cost === 0 ? [] : [`a 0 ${j + 1} ${column.cost}`])),
    ...coefficients,
    'e o f',
    '',
  ].join('\n')
}

function parseProblem(text: string): GlpkProblem {
  const lines = text.split('\n').map((line) => line.split(' '))
  const [, kind, sense, rowCount, columnCount] = lines.find(([tag]) => tag === 'p')!
  if (kind !== 'lp') throw new Error('Only linear programs without whole numbers are compared here.')
  const sign = sense === 'max' ? -1 : 1
  // Rows and columns without a descriptor are equalities to zero and non-negative amounts.
  const lp: LinearProgram = {
    rows: Array.from({ length: Number(rowCount) }, (_, i) => ({
      id: `row ${i + 1}`,
      lower: 0,
      upper: 0,
      entries: [],
    })),
    columns: Array.from({ length: Number(columnCount) }, (_, j) => ({
      id: `column ${j + 1}`,
      cost: 0,
      lower: 0,
      upper: Infinity,
    })),
  }
  let constant = 0
  for (const [tag, first, second, ...rest] of lines) {
    if (tag === 'i') Object.assign(lp.rows[Number(first) - 1]!, readBounds([second!, ...rest]))
    else if (tag === 'j') Object.assign(lp.columns[Number(first) - 1]!, readBounds([second!, ...rest]))
    else if (tag === 'n' && first === 'i') lp.rows[Number(second) - 1]!.id = `${rest.join(' ')} (${second})`
    else if (tag === 'n' && first === 'j')
      lp.columns[Number(second) - 1]!.id = `${rest.join(' ')} (${second})`
    else if (tag === 'a') {
      const [row, column, value] = [Number(first), Number(second), Number(rest[0])]
      if (row > 0) lp.rows[row - 1]!.entries.push([column - 1, value])
      else if (column > 0) lp.columns[column - 1]!.cost = sign * value
      else constant = value
    }
  }
  return { lp, maximises: sign < 0, constant }
}

function parseSolution(text: string): GlpkSolution {
  const solution: GlpkSolution = { status: 'other', objective: NaN, rows: [], columns: [] }
  for (const [tag, first, second, third, fourth, fifth, sixth] of text
    .split('\n')
    .map((line) => line.split(' '))) {
    if (tag === 's' && first === 'bas') {
      const primal = fourth
      const dual = fifth
      if (primal === 'f' && dual === 'f') solution.status = 'optimal'
      else if (primal === 'n') solution.status = 'infeasible'
      else if (dual === 'n') solution.status = 'unbounded'
      solution.objective = Number(sixth)
    } else if (tag === 'i')
      solution.rows.push({ status: second!, activity: Number(third), dual: Number(fourth) })
    else if (tag === 'j')
      solution.columns.push({ status: second!, value: Number(third), reducedCost: Number(fourth) })
  }
  return solution
}
