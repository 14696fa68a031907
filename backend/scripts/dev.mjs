/**
 * `npm run dev`: the same set-up as `npm start`, then the server from its sources, started again when one
 * changes, and Vite in front of it, which puts changed parts into the open page. Both are on one origin.
 */
import { pathToFileURL } from 'node:url'
import { inVite } from './frontend.mjs'
import { Lifecycle } from './lifecycle.mjs'
import { inProject } from './paths.mjs'
import { freePort } from './ports.mjs'
import { say } from './say.mjs'
import { startServer } from './server.mjs'
import { setUp } from './setUp.mjs'
import { printAddress } from './signIns.mjs'

const lifecycle = new Lifecycle()

try {
  const { directory, port, env } = await setUp(lifecycle)
  const apiPort = await freePort(port + 1)
  const server = startServer({
    directory,
    port: apiPort,
    command: [
      inProject('node_modules/tsx/dist/cli.mjs'),
      'watch',
      '--clear-screen=false',
      inProject('backend/src/server.ts'),
    ],
    env: { NODE_ENV: 'development', ...env, HOST: '127.0.0.1' },
    toStdout: true,
  })
  lifecycle.onEnd(server.stop)
  void server.ended.then(() => lifecycle.fail(server.failure()))
  await server.ready()

  /** @type {typeof import('vite')} */
  const { createServer } = await import(pathToFileURL(inVite('dist', 'node', 'index.js')).href)
  const pages = await createServer({
    root: inProject('frontend'),
    configFile: inProject('frontend/vite.config.ts'),
    server: {
      host: process.env.HOST || '127.0.0.1',
      port,
      strictPort: true,
      // The Host header stays as the browser sent it: the server compares it with the Origin of every change.
      proxy: { '/api': { target: `http://127.0.0.1:${apiPort}`, changeOrigin: false } },
    },
  })
  lifecycle.onEnd(() => pages.close())
  await pages.listen()
  printAddress(port, directory)
  say('Stop with Ctrl-C.')
} catch (error) {
  await lifecycle.fail(error)
}
