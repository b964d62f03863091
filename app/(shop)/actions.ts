"use server";

import { placeOrder, priceShortlist } from "@/lib/licensing";
import {
  addToShortlist as addToShortlistVerb,
  createProduction as createProductionVerb,
  removeFromShortlist as removeFromShortlistVerb,
  setProductionUse as setProductionUseVerb,
  setShortlistItem as setShortlistItemVerb,
} from "@/lib/productions";
import { action } from "@/lib/web";

const lists = ["/find", "/", "/productions"];

export const createProduction = action(createProductionVerb, {
  redirectTo: ({ data }) => `/productions/${data.productionId}`,
});
export const setProductionUse = action(setProductionUseVerb, {
  refresh: ({ input }) => [`/productions/${input.productionId}`, ...lists],
});
export const addToShortlist = action(addToShortlistVerb, {
  refresh: ({ input }) => [`/productions/${input.productionId}`, ...lists],
});
export const setShortlistItem = action(setShortlistItemVerb, { refresh: () => lists });
export const removeFromShortlist = action(removeFromShortlistVerb, { refresh: () => lists });
export const priceProduction = action(priceShortlist, {
  refresh: ({ input }) => [`/productions/${input.productionId}`, ...lists],
});
export const orderFromShortlist = action(placeOrder, {
  redirectTo: ({ data }) => `/orders/${data.orderId}`,
});
