import { mkdirSync } from 'node:fs'
import { dirname, join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'

/** The checkout's top directory. */
export const projectRoot = dirname(dirname(dirname(fileURLToPath(import.meta.url))))

/**
 * Where Maslin keeps what it must not lose (database, secrets, attachments): MASLIN_DATA_DIR or `.maslin`
 * under the project. Created for the owner alone, since it holds passwords.
 * @returns {string} absolute path
 */
export function dataDirectory() {
  const directory = resolve(projectRoot, process.env.MASLIN_DATA_DIR || '.maslin')
  mkdirSync(directory, { recursive: true, mode: 0o700 })
  return directory
}

/**
 * A path below the project's top directory.
 * @param {...string} parts
 */
export function inProject(...parts) {
  return join(projectRoot, ...parts)
}
