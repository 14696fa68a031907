import { z } from 'zod'
import { AppError } from '../errors'
import { route, type Services } from './route'

const readySchema = z.object({ database: z.boolean(), workers: z.boolean() })

/** Whether the parts behind the API answer. */
async function checkParts({ database, solving }: Services): Promise<z.infer<typeof readySchema>> {
  const [databaseAnswers, workersAnswer] = await Promise.all([
    database.ping().then(
      () => true,
      () => false,
    ),
    solving.ready().catch(() => false),
  ])
  return { database: databaseAnswers, workers: workersAnswer }
}

export const healthRoutes = [
  route({
    method: 'get',
    path: '/health',
    access: 'public',
    answer: z.object({ status: z.literal('ok') }),
    handle: () => Promise.resolve({ status: 'ok' as const }),
  }),
  route({
    method: 'get',
    path: '/ready',
    access: 'public',
    answer: readySchema,
    handle: async (call) => {
      const parts = await checkParts(call)
      if (call.isOpen() && parts.database && parts.workers) return parts
      const ill = [...(parts.database ? [] : ['database']), ...(parts.workers ? [] : ['workers'])]
      throw new AppError('not_ready', {
        detail: ill.length > 0 ? `No answer from: ${ill.join(', ')}.` : 'Starting or stopping.',
        headers: { 'Retry-After': '2' },
      })
    },
  }),
]
