export type { BaseDietItemRow, GroupRow, NeedOverrideRow } from '../models/groups'
