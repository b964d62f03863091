import { admitUpload, fileArrived, paperArrived } from "@/lib/deliveries";
import { system } from "@/lib/kernel/actor";
import { Invalid, Precondition, Unauthenticated } from "@/lib/kernel/errors";
import { makeUploadHandlers, type UploadGate } from "@/lib/uploads";
import { viewer } from "@/lib/web";

const store = system("uploads");

/** A master's subject is its delivery, or "delivery/version" where the file takes the place of another. */
function masterSubject(subjectId: string): { deliveryId: string; replaces: string } {
  const [deliveryId = "", replaces = "", more] = subjectId.split("/");
  if (more !== undefined) throw new Invalid("That is not the address of a delivery.");
  return { deliveryId, replaces };
}

async function admitted(deliveryId: string, files: number): Promise<string> {
  const { actor, person } = await viewer();
  if (!person) throw new Unauthenticated();
  await admitUpload(actor, { deliveryId, files });
  return person.id;
}

const master: UploadGate = {
  admit: async ({ subjectId, files }) => {
    const { deliveryId, replaces } = masterSubject(subjectId);
    const empty = files.find((file) => file.sizeBytes === 0);
    if (empty) throw new Invalid(`${empty.name} holds no bytes. Export it again; the other files are kept.`);
    const personId = await admitted(deliveryId, files.length);
    return { context: { deliveryId, personId, replaces } };
  },
  arrived: async (file, { deliveryId = "", personId = "", replaces }) => {
    const { versionId } = await fileArrived(
      store,
      {
        deliveryId,
        personId,
        key: file.key,
        name: file.name,
        sizeBytes: file.sizeBytes,
        replaces: replaces || null,
      },
      { operationId: `arrived:${file.key}`.slice(0, 120) },
    );
    return { versionId };
  },
};

const paper: UploadGate = {
  admit: async ({ subjectId, files }) => {
    const personId = await admitted(subjectId, files.length);
    return { context: { deliveryId: subjectId, personId } };
  },
  arrived: async (file, { deliveryId = "", personId = "" }) => {
    await paperArrived(
      store,
      {
        deliveryId,
        personId,
        key: file.key,
        name: file.name,
        mime: file.type.slice(0, 120) || "application/octet-stream",
        sizeBytes: file.sizeBytes,
      },
      { operationId: `paper:${file.key}`.slice(0, 120) },
    );
    return { key: file.key, name: file.name };
  },
};

const notOpen = async (): Promise<never> => {
  throw new Precondition(
    "Confidential recordings of a notice cannot be sent here yet: this gate is not open.",
  );
};
const confidential: UploadGate = { admit: notOpen, arrived: notOpen };

export const { GET, POST } = makeUploadHandlers({ master, paper, confidential });
