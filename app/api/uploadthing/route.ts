import { admitUpload, fileArrived, paperArrived } from "@/lib/deliveries";
import { system } from "@/lib/kernel/actor";
import { Invalid, Unauthenticated } from "@/lib/kernel/errors";
import { admitConfidential, confidentialArrived } from "@/lib/reports";
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

/** The one-use ticket travels as the subject; it is spent when the recording is announced. */
const confidential: UploadGate = {
  admit: async ({ subjectId, files }) => {
    const { actor } = await viewer();
    const { noticeId } = await admitConfidential(actor, {
      ticket: subjectId,
      files: files.length,
      sizeBytes: Math.max(0, ...files.map((file) => file.sizeBytes)),
    });
    return { context: { noticeId } };
  },
  arrived: async (file, { noticeId = "" }) => {
    await confidentialArrived(
      store,
      { noticeId, fileKey: file.key },
      { operationId: `confidential:${file.key}`.slice(0, 120) },
    );
    return {};
  },
};

export const { GET, POST } = makeUploadHandlers({ master, paper, confidential });
