import { spawn, type ChildProcess } from 'node:child_process'
import { once } from 'node:events'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { commandOf, endProcess, notePid, pidFrom, processesWith, run } from './processes.mjs'

let directory: string
let child: ChildProcess | undefined

beforeEach(() => {
  directory = mkdtempSync(join(tmpdir(), 'maslin-processes-'))
})

afterEach(() => {
  child?.kill('SIGKILL')
  rmSync(directory, { recursive: true, force: true })
})

/** A process that runs the given code and has said that it has begun; the directory's name is on its command line. */
async function sleeper(code: string): Promise<number> {
  const running = spawn(process.execPath, [
    '-e',
    `${code}; console.log('on'); setTimeout(() => {}, 60_000)`,
    directory,
  ])
  child = running
  await once(running.stdout, 'data')
  return running.pid ?? 0
}

describe('ending a process', () => {
  it('lets it end by itself', async () => {
    const pid = await sleeper('')
    expect(processesWith(directory)).toEqual([pid])
    expect(await endProcess(pid, 10_000)).toBe(true)
    expect(commandOf(pid)).toBeUndefined()
    expect(processesWith(directory)).toEqual([])
  })

  it('kills one that will not', async () => {
    const pid = await sleeper("process.on('SIGTERM', () => {})")
    expect(await endProcess(pid, 300)).toBe(false)
    expect(commandOf(pid)).toBeUndefined()
  })
})

describe('a pid file', () => {
  it('names a process that still runs what we noted', async () => {
    const pid = await sleeper('')
    const file = join(directory, 'some.pid')
    notePid(file, pid)
    expect(pidFrom(file, directory)).toBe(pid)
  })

  it('names none when its process is gone, is another program now, or the file is no pid', async () => {
    const pid = await sleeper('')
    const file = join(directory, 'some.pid')
    notePid(file, pid)
    expect(pidFrom(file, 'another program')).toBeUndefined()
    await endProcess(pid, 10_000)
    expect(pidFrom(file, directory)).toBeUndefined()
    writeFileSync(file, 'twelve')
    expect(pidFrom(file, '')).toBeUndefined()
    expect(pidFrom(join(directory, 'none.pid'), '')).toBeUndefined()
  })
})

describe('running a command', () => {
  it('gives its exit code and output', async () => {
    const code = "console.log('out'); console.error('err'); process.exit(3)"
    const result = await run(process.execPath, ['-e', code], { quiet: true })
    expect(result.code).toBe(3)
    expect(result.output).toMatch(/out\n/)
    expect(result.output).toMatch(/err\n/)
  })

  it('gives 127 where there is no such command', async () => {
    expect((await run('no-such-command-here', [], { quiet: true })).code).toBe(127)
  })
})
