/** Thrown inside the formulation when the caller's time is up; turned into a `stopped` answer at its edge. */
export class OutOfTime extends Error {
  constructor() {
    super('The time allowed for this solve was up.')
    this.name = 'OutOfTime'
  }
}

/** The end of a call, handed from solve to solve. */
export class Deadline {
  /** As a time of `performance.now()`. */
  readonly until: number

  constructor(milliseconds: number) {
    this.until = performance.now() + milliseconds
  }

  /** Milliseconds left; throws `OutOfTime` where there are none. */
  left(): number {
    const left = this.until - performance.now()
    if (left <= 0) throw new OutOfTime()
    return left
  }
}
