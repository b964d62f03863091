export { createProduction } from "./create-production";
export { keepPriceSnapshot, productionById, shortlistOf } from "./for-rooms";
export {
  getProduction,
  listProductions,
  type ProductionEntry,
  type ProductionPage,
  type ShortlistCue,
} from "./reads";
export { setProductionUse } from "./set-production-use";
export { addToShortlist, removeFromShortlist, setShortlistItem } from "./shortlist";
export { PRODUCTION_KINDS, SHORTLIST_STATES, type ShortlistState } from "./states";
