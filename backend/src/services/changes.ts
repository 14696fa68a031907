/** The fields that are there: an absent field leaves what is stored as it is. */
export function withoutAbsent<T extends object>(
  fields: T,
): { [Key in keyof T]?: Exclude<T[Key], undefined> } {
  const present = Object.entries(fields).filter(([, value]) => value !== undefined)
  return Object.fromEntries(present) as { [Key in keyof T]?: Exclude<T[Key], undefined> }
}

/** Today as `YYYY-MM-DD`, in UTC. */
export const today = (now = new Date()): string => now.toISOString().slice(0, 10)
