import {
  offerSchema,
  priceSchema,
  type Offer,
  type OfferCreate,
  type OfferUpdate,
  type Price,
  type PriceSet,
} from '@maslin/shared'
import { getAll, patch, post, remove } from './client'

/** Offers with the price that holds on the day (absent: today). */
export const fetchOffers = (
  farmId: string,
  query: { asOf?: string; feedId?: string } = {},
): Promise<Offer[]> => getAll(`/farms/${farmId}/offers`, offerSchema, { ...query })
export const createOffer = (farmId: string, body: OfferCreate): Promise<Offer> =>
  post(`/farms/${farmId}/offers`, offerSchema, body)
export const updateOffer = (
  farmId: string,
  offerId: string,
  body: OfferUpdate,
  version: number,
): Promise<Offer> => patch(`/farms/${farmId}/offers/${offerId}`, offerSchema, body, version)
export const removeOffer = (farmId: string, offerId: string, version: number): Promise<void> =>
  remove(`/farms/${farmId}/offers/${offerId}`, version)

/** Every price of an offer, newest first. */
export const fetchPrices = (farmId: string, offerId: string): Promise<Price[]> =>
  getAll(`/farms/${farmId}/offers/${offerId}/prices`, priceSchema)
/** Sets the price of a day; the same day again replaces it. */
export const setPrice = (farmId: string, offerId: string, body: PriceSet): Promise<Offer> =>
  post(`/farms/${farmId}/offers/${offerId}/prices`, offerSchema, body)
