import type { Supplier, SupplierCreate } from '@maslin/shared'
import { AppError } from '../errors'
import type { FarmRepositories } from '../repositories/inFarm'
import type { SupplierRow } from '../repositories/prices'
import { withoutAbsent } from './changes'

const toSupplier = ({ id, name, note, version }: SupplierRow): Supplier => ({
  id,
  name,
  note: note ?? undefined,
  version,
})

/** By name. */
export async function listSuppliers(farm: FarmRepositories): Promise<Supplier[]> {
  return (await farm.suppliers.list({}, { orderBy: [['name', 'ASC']] })).map(toSupplier)
}

export async function getSupplier(farm: FarmRepositories, id: string): Promise<Supplier> {
  return toSupplier(await farm.suppliers.get(id))
}

/** @throws AppError `name_taken` */
export async function createSupplier(farm: FarmRepositories, fields: SupplierCreate): Promise<Supplier> {
  await requireFreeName(farm, fields.name)
  const row = await farm.suppliers.insert({ name: fields.name, note: fields.note ?? null })
  const supplier = toSupplier(row)
  await farm.audit.record({ action: 'create', entity: 'supplier', entityId: row.id, after: supplier })
  return supplier
}

/** @throws AppError `name_taken` */
export async function updateSupplier(
  farm: FarmRepositories,
  id: string,
  version: number,
  changes: Partial<SupplierCreate>,
): Promise<Supplier> {
  const before = await getSupplier(farm, id)
  if (changes.name !== undefined) await requireFreeName(farm, changes.name, id)
  const after = toSupplier(await farm.suppliers.update(id, version, withoutAbsent(changes)))
  await farm.audit.record({ action: 'update', entity: 'supplier', entityId: id, before, after })
  return after
}

/** @throws AppError `in_use` while there are offers of theirs */
export async function removeSupplier(farm: FarmRepositories, id: string, version: number): Promise<void> {
  const before = toSupplier(await farm.suppliers.remove(id, version))
  await farm.audit.record({ action: 'delete', entity: 'supplier', entityId: id, before })
}

async function requireFreeName(farm: FarmRepositories, name: string, exceptId?: string): Promise<void> {
  const other = await farm.suppliers.findBy({ name })
  if (!other || other.id === exceptId) return
  const message = `There is a supplier called ${other.name} already.`
  throw new AppError('name_taken', { detail: message, errors: [{ path: 'name', code: 'taken', message }] })
}
