"use server";

import { confirmReporterAddress, submitNotice } from "@/lib/reports";
import { action, clientAddress } from "@/lib/web";

export const sendReport = action(submitNotice, {
  adds: async () => ({ fromAddress: await clientAddress() }),
});

export const confirmAddress = action(confirmReporterAddress);
