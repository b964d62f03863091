"use server";

import {
  approveOrder as approveOrderVerb,
  placeOrder as placeOrderVerb,
  refundLines as refundLinesVerb,
  setWithheld as setWithheldVerb,
  withdrawOrder as withdrawOrderVerb,
} from "@/lib/licensing";
import { action, clientAddress } from "@/lib/web";

export const proposeOrder = action(placeOrderVerb);
export const approveOrder = action(approveOrderVerb, {
  adds: async () => ({ address: await clientAddress() }),
});
export const withdrawOrder = action(withdrawOrderVerb, {
  refresh: ({ input }) => [`/orders/${input.orderId}`, "/records"],
});
export const refundLines = action(refundLinesVerb, {
  refresh: ({ input }) => [`/orders/${input.orderId}`],
});
export const setWithheld = action(setWithheldVerb, {
  refresh: ({ input }) => [`/records/${input.number}`],
});
