import { chmod, mkdir, rename, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { randomInt } from 'node:crypto'
import { QueryTypes, type Transaction } from 'sequelize'
import type { Role } from '@maslin/shared'
import { hashPassword } from '../auth/passwords'
import type { Database } from '../database/database'
import { accounts } from '../repositories/accounts'
import { inFarm, type FarmRepositories } from '../repositories/inFarm'
import type { Services } from '../routes/route'
import { readDemoFiles, type DemoFarm, type DemoFiles } from './demoFiles'
import { stockFarm } from './stockFarm'
import { workOnMix } from './workOnMix'

export type DemoServices = Pick<Services, 'config' | 'database' | 'solving' | 'requirements'>

export interface DemoSignIn {
  farm: string
  name: string
  role: Role
  email: string
  password: string
}

/** Somebody of the demo, with the account made for them. */
export interface DemoPerson {
  id: string
  name: string
}

/** A demo farm while it is filled. */
export interface DemoSite extends DemoServices {
  farmId: string
  farm: DemoFarm
  /** Members by their `ref`. */
  people: ReadonlyMap<string, DemoPerson>
  /** Repositories of the farm for something that this person does. */
  as: (ref: string) => FarmRepositories
  /** Ids of feeds, by book key or `ref`, and of groups by name. */
  feedIds: Map<string, string>
  groupIds: Map<string, string>
}

/**
 * Fills an empty installation with the invented farms, their people, prices, groups, mixes and scenarios, all of it or
 * nothing, and writes the sign-ins to `demo-sign-ins.json` in the data directory, readable by its owner only.
 * @returns the sign-ins, or undefined where there was nothing to do: turned off, or there are accounts already
 */
export async function loadDemo(services: DemoServices): Promise<DemoSignIn[] | undefined> {
  const { config, database } = services
  if (!config.demo || (await accounts(database).any())) return undefined
  const files = await readDemoFiles(join(config.libraryDirectory, 'demo'))
  const credentials = await makeCredentials(files)
  return takingTurns(database, () =>
    database.transaction(async (transaction) => {
      if (await accounts(database, transaction).any()) return undefined
      const signIns = await fill(services, files, credentials, transaction)
      await writeSignIns(config.dataDirectory, signIns)
      return signIns
    }),
  )
}

async function fill(
  services: DemoServices,
  { farms, mixes }: DemoFiles,
  credentials: Credentials,
  transaction: Transaction,
): Promise<DemoSignIn[]> {
  const { database } = services
  const directory = accounts(database, transaction)
  const ids = new Map<string, string>()
  const signIns: DemoSignIn[] = []
  for (const farm of farms) {
    const account = await directory.addFarm(farm)
    const people = new Map<string, DemoPerson>()
    for (const { ref, name, email, role } of farm.members) {
      const { password, passwordHash } = credentials.get(email) ?? failOn(email)
      const id = ids.get(email) ?? (await directory.addUser({ name, email, passwordHash })).id
      ids.set(email, id)
      people.set(ref, { id, name })
      signIns.push({ farm: farm.name, name, role, email, password })
    }
    const as = (ref: string) =>
      inFarm(database, account.id, transaction, {
        userId: people.get(ref)?.id ?? failOn(ref),
        requestId: 'demo',
      })
    const site: DemoSite = {
      ...services,
      farmId: account.id,
      farm,
      people,
      as,
      feedIds: new Map(),
      groupIds: new Map(),
    }
    await stockFarm(site)
    for (const mix of mixes) if (mix.farm === farm.name) await workOnMix(site, mix)
  }
  return signIns
}

const failOn = (what: string): never => {
  throw new Error(`the demo files do not explain ${what}`)
}

/** Two processes that start together must not both fill the database. */
async function takingTurns<T>({ sequelize }: Database, work: () => Promise<T>): Promise<T> {
  return sequelize.transaction(async (transaction) => {
    const ask = { transaction, type: QueryTypes.SELECT } as const
    await sequelize.query("SELECT GET_LOCK('maslin.demo', 120)", ask)
    try {
      return await work()
    } finally {
      await sequelize.query("SELECT RELEASE_LOCK('maslin.demo')", ask)
    }
  })
}

type Credentials = Map<string, { password: string; passwordHash: string }>

async function makeCredentials({ farms }: DemoFiles): Promise<Credentials> {
  const emails = new Set(farms.flatMap((farm) => farm.members.map(({ email }) => email)))
  const made = [...emails].map(async (email) => {
    const password = newPassword()
    return [email, { password, passwordHash: await hashPassword(password) }] as const
  })
  return new Map(await Promise.all(made))
}

/** Signs that cannot be taken for one another when read off a terminal. */
const signs = 'abcdefghjkmnpqrstuvwxyz23456789'

/** Four groups of four, about 79 bits. */
function newPassword(): string {
  const group = () => Array.from({ length: 4 }, () => signs[randomInt(signs.length)]).join('')
  return [group(), group(), group(), group()].join('-')
}

async function writeSignIns(directory: string, signIns: readonly DemoSignIn[]): Promise<void> {
  const file = join(directory, 'demo-sign-ins.json')
  await mkdir(directory, { recursive: true, mode: 0o700 })
  await writeFile(`${file}.new`, `${JSON.stringify(signIns, null, 2)}\n`, { mode: 0o600 })
  await chmod(`${file}.new`, 0o600)
  await rename(`${file}.new`, file)
}
