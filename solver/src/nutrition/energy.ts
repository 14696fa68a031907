/**
 * Energy values per kg of dry matter from one another. TDN is given in g/kg as everywhere in Maslin (10 g/kg = 1 %),
 * energies in Mcal/kg of dry matter.
 */

/** Mcal of digestible energy in one kg of TDN: NRC 1981 (Goats), p. 10. */
const DE_PER_KG_TDN = 4.409

/** Share of digestible energy that is metabolizable: NRC 1985 (Sheep). */
const ME_PER_DE = 0.82

export const MJ_PER_MCAL = 4.184

/** DE (Mcal/kg or Mcal per day) of TDN (g/kg or g per day): 0.04409 × TDN %, NRC 1981 (Goats). */
export function digestibleEnergyFromTdn(tdn: number): number {
  return (DE_PER_KG_TDN * tdn) / 1000
}

/** ME of DE, same unit: 0.82 × DE, NRC 1985 (Sheep). */
export function metabolizableFromDigestibleEnergy(digestibleEnergy: number): number {
  return ME_PER_DE * digestibleEnergy
}

/** ME (Mcal/kg or Mcal per day) of TDN (g/kg or g per day), by way of DE. */
export function metabolizableEnergyFromTdn(tdn: number): number {
  return metabolizableFromDigestibleEnergy(digestibleEnergyFromTdn(tdn))
}

/**
 * NEm (Mcal/kg dry matter) of ME (Mcal/kg dry matter): 1.37 ME − 0.138 ME² + 0.0105 ME³ − 1.12, NRC 1984 (Beef).
 * Never below 0: a feed that poor has no net energy to give.
 */
export function netEnergyMaintenance(me: number): number {
  return Math.max(0, 1.37 * me - 0.138 * me ** 2 + 0.0105 * me ** 3 - 1.12)
}

/**
 * NEg (Mcal/kg dry matter) of ME (Mcal/kg dry matter): 1.42 ME − 0.174 ME² + 0.0122 ME³ − 1.65, NRC 1984 (Beef).
 * Never below 0.
 */
export function netEnergyGain(me: number): number {
  return Math.max(0, 1.42 * me - 0.174 * me ** 2 + 0.0122 * me ** 3 - 1.65)
}

/** NEl (Mcal/kg dry matter) of TDN (g/kg dry matter): 0.0245 × TDN % − 0.12, NRC 1989 (Dairy). Never below 0. */
export function netEnergyLactationFromTdn(tdn: number): number {
  return Math.max(0, (0.0245 * tdn) / 10 - 0.12)
}

/** Body weight to the power 0.75, the size by which energy and protein of maintenance scale. */
export function metabolicWeight(bodyWeightKg: number): number {
  return bodyWeightKg ** 0.75
}
