import {
  idSchema,
  offerCreateSchema,
  offerSchema,
  offersQuerySchema,
  offerUpdateSchema,
  pageOf,
  priceSchema,
  priceSetSchema,
} from '@maslin/shared'
import { z } from 'zod'
import { createOffer, getOffer, listOffers, removeOffer, setPrice, updateOffer } from '../services/offers'
import { listPrices } from '../services/prices'
import { route } from './route'

const params = z.object({ offerId: idSchema })
const oneOffer = { path: '/farms/:farmId/offers/:offerId', params }
const pricesOfOffer = { path: '/farms/:farmId/offers/:offerId/prices', params }

export const offerRoutes = [
  route({
    method: 'get',
    path: '/farms/:farmId/offers',
    access: 'prices.read',
    query: offersQuerySchema,
    answer: pageOf(offerSchema),
    handle: ({ query, inFarm }) =>
      inFarm(async (farm) => ({ items: await listOffers(farm, query.asOf ?? farm.today, query.feedId) })),
  }),
  route({
    method: 'post',
    path: '/farms/:farmId/offers',
    access: 'prices.write',
    body: offerCreateSchema,
    answer: offerSchema,
    status: 201,
    handle: ({ body, inFarm }) => inFarm((farm) => createOffer(farm, body)),
  }),
  route({
    ...oneOffer,
    method: 'patch',
    access: 'prices.write',
    body: offerUpdateSchema,
    answer: offerSchema,
    current: ({ params: { offerId }, inFarm }) => inFarm((farm) => getOffer(farm, offerId)),
    handle: ({ params: { offerId }, body, version, inFarm }) =>
      inFarm((farm) => updateOffer(farm, offerId, version, body)),
  }),
  route({
    ...oneOffer,
    method: 'delete',
    access: 'prices.write',
    current: ({ params: { offerId }, inFarm }) => inFarm((farm) => getOffer(farm, offerId)),
    currentAnswer: offerSchema,
    handle: ({ params: { offerId }, version, inFarm }) =>
      inFarm((farm) => removeOffer(farm, offerId, version)),
  }),
  route({
    ...pricesOfOffer,
    method: 'get',
    access: 'prices.read',
    answer: pageOf(priceSchema),
    handle: ({ params: { offerId }, inFarm }) =>
      inFarm(async (farm) => ({ items: await listPrices(farm, offerId) })),
  }),
  route({
    ...pricesOfOffer,
    method: 'post',
    access: 'prices.write',
    body: priceSetSchema,
    answer: offerSchema,
    status: 201,
    handle: ({ params: { offerId }, body, inFarm }) => inFarm((farm) => setPrice(farm, offerId, body)),
  }),
]
