/**
 * Affine expressions in the columns of a program: constant + Σ terms[j] · x[j]. Everything that a limit can be about
 * (dry matter, weight as fed, an amount of a nutrient, the weight of some feeds) is one, and so are the two parts of a
 * share, a concentration or a ratio.
 */
export interface Form {
  constant: number
  terms: Float64Array
}

export function constantForm(columns: number, constant: number): Form {
  return { constant, terms: new Float64Array(columns) }
}

/** Value of the form at the given amounts. */
export function valueOf(form: Form, amounts: ArrayLike<number>): number {
  let sum = form.constant
  for (let j = 0; j < form.terms.length; j++) sum += form.terms[j]! * amounts[j]!
  return sum
}

/** `form` · factor. */
export function scaledForm(form: Form, factor: number): Form {
  return { constant: form.constant * factor, terms: form.terms.map((term) => term * factor) }
}

/** Whether the form is the same whatever the amounts are. */
export function isConstant(form: Form): boolean {
  return form.terms.every((term) => term === 0)
}

export function sameForm(a: Form, b: Form): boolean {
  return a.constant === b.constant && a.terms.every((term, j) => term === b.terms[j])
}
