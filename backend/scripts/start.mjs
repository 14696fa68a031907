/**
 * `npm start`: prepares a machine that has nothing but Node, and runs Maslin on it until told to stop.
 * Plain JavaScript, since it runs before any package is installed.
 */
import { buildBackend } from './build.mjs'
import { buildFrontend } from './frontend.mjs'
import { Lifecycle } from './lifecycle.mjs'
import { inProject } from './paths.mjs'
import { say } from './say.mjs'
import { startServer } from './server.mjs'
import { setUp } from './setUp.mjs'
import { printAddress } from './signIns.mjs'

const lifecycle = new Lifecycle()

try {
  const { directory, port, env } = await setUp(lifecycle)
  await Promise.all([buildFrontend(), buildBackend()])
  const server = startServer({
    directory,
    port,
    command: ['--enable-source-maps', inProject('backend/dist/server.js')],
    env: { NODE_ENV: 'production', ...env },
  })
  lifecycle.onEnd(server.stop)
  await server.ready()
  void server.ended.then(() => lifecycle.fail(server.failure()))
  printAddress(port, directory)
  say('Stop with Ctrl-C.')
} catch (error) {
  await lifecycle.fail(error)
}
