import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { inProject } from './paths.mjs'

const stampName = '.sources'

/**
 * A digest of the names and contents of files and of everything in directories; what does not exist adds nothing.
 * Contents, not times: a fresh checkout of the same sources counts as the same.
 * @param {string[]} paths relative to the project
 * @returns {string}
 */
export function digestOf(paths) {
  const hash = createHash('sha256')
  for (const path of paths) addTo(hash, inProject(path), path)
  return hash.digest('hex')
}

/**
 * @param {import('node:crypto').Hash} hash
 * @param {string} file
 * @param {string} name
 */
function addTo(hash, file, name) {
  if (!existsSync(file)) return
  if (statSync(file).isDirectory()) {
    for (const entry of readdirSync(file).sort()) addTo(hash, join(file, entry), `${name}/${entry}`)
  } else if (!/\.test\.\w+$/.test(name)) {
    hash.update(`${name}\0`).update(readFileSync(file)).update('\0')
  }
}

/**
 * Whether a directory holds what was built from sources of this digest.
 * @param {string} directory
 * @param {string} digest
 */
export function isBuiltFrom(directory, digest) {
  const stamp = join(directory, stampName)
  return existsSync(stamp) && readFileSync(stamp, 'utf8') === digest
}

/**
 * Notes what a finished build was made from.
 * @param {string} directory
 * @param {string} digest
 */
export function noteBuiltFrom(directory, digest) {
  writeFileSync(join(directory, stampName), digest)
}
