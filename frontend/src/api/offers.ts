import {
  offerSchema,
  pageOf,
  priceSchema,
  type Offer,
  type OfferCreate,
  type OfferUpdate,
  type Price,
  type PriceSet,
} from '@maslin/shared'
import { get, patch, post, remove } from './client'

const offersSchema = pageOf(offerSchema)
const pricesSchema = pageOf(priceSchema)

/** Offers with the price that holds on the day (absent: today). */
export const fetchOffers = async (
  farmId: string,
  query: { asOf?: string; feedId?: string } = {},
): Promise<Offer[]> =>
  (await get(`/farms/${farmId}/offers`, offersSchema, { query: { ...query, limit: 500 } })).items
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
export const fetchPrices = async (farmId: string, offerId: string): Promise<Price[]> =>
  (await get(`/farms/${farmId}/offers/${offerId}/prices`, pricesSchema, { query: { limit: 500 } })).items
/** Sets the price of a day; the same day again replaces it. */
export const setPrice = (farmId: string, offerId: string, body: PriceSet): Promise<Offer> =>
  post(`/farms/${farmId}/offers/${offerId}/prices`, offerSchema, body)
