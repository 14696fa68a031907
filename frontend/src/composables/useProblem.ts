import { useI18n } from 'vue-i18n'
import { ApiError } from '../api/client'

/** Words for what went wrong. */
export function useProblem() {
  const { t, te } = useI18n()

  /** One or two sentences: what happened, what was kept, what to do. */
  function explain(error: unknown): string {
    if (!(error instanceof ApiError)) return t('problems.unexpected')
    const key = `problems.${error.code}`
    return te(key) ? t(key, { seconds: error.details.retryAfter ?? 5 }) : t('problems.unexpected')
  }

  /** What is wrong with one field of the request, undefined where nothing is. */
  function fieldMessage(error: unknown, path: string): string | undefined {
    if (!(error instanceof ApiError)) return undefined
    const problem = error.fieldProblem(path)
    if (!problem) return undefined
    const key = `problems.fields.${problem.code}`
    return te(key) ? t(key) : problem.message
  }

  return { explain, fieldMessage }
}
