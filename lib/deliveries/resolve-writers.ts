import type { Tx } from "@/db/client";
import { writerOnRoster } from "@/lib/accounts";
import { Invalid } from "@/lib/kernel/errors";
import type { DeliveryRow } from "./own-delivery";
import type { DeliveryForm } from "./schemas";

export type ResolvedWriter = DeliveryForm["writers"][number] & {
  personId: string | null;
  contact: string | null;
  state: "asked" | "accepted";
  acceptedAt: Date | null;
};

/** A writer is found on the roster by IPI or address; one who is not known there is shown as unconfirmed. */
export async function resolveWriters(
  tx: Tx,
  delivery: DeliveryRow,
  form: DeliveryForm,
  now: Date,
): Promise<ResolvedWriter[]> {
  const writers: ResolvedWriter[] = [];
  for (const writer of form.writers) {
    const known = await knownWriter(tx, delivery.libraryId, writer);
    const isDeliverer = known?.personId === delivery.delivererId;
    writers.push({
      ...writer,
      personId: known?.personId ?? null,
      contact: writer.email,
      state: isDeliverer ? "accepted" : "asked",
      acceptedAt: isDeliverer ? now : null,
    });
  }
  return writers;
}

async function knownWriter(tx: Tx, libraryId: string, writer: DeliveryForm["writers"][number]) {
  const byIpi = writer.ipi ? await writerOnRoster(tx, { libraryId, ipi: writer.ipi }) : null;
  const known = byIpi ?? (writer.email ? await writerOnRoster(tx, { libraryId, email: writer.email }) : null);
  if (writer.ipi && known?.confirmed?.ipi && known.confirmed.ipi !== writer.ipi)
    throw new Invalid(
      `${writer.name}: this address belongs to a writer whose confirmed IPI is another one (M02). Correct the IPI or the address.`,
      { writers: "IPI and address belong to two people" },
    );
  return known;
}
