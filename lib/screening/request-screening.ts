import type { Tx } from "@/db/client";
import { screeningRequests } from "@/db/schema/screening";
import { enqueue } from "@/lib/jobs";

export interface ScreeningRequest {
  recordingId: string;
  familyId: string;
  libraryId: string;
  delivererId: string;
  writerIds: string[];
  declaredLoops: string[];
  expectsFamilyMatch: boolean;
  now: Date;
}

/** Asks for a recording to be screened, in the transaction that makes it pending. Asking again screens again. */
export async function requestScreening(tx: Tx, request: ScreeningRequest): Promise<void> {
  const { now, ...columns } = request;
  const values = { ...columns, requestedAt: now };
  await tx.insert(screeningRequests).values(values).onDuplicateKeyUpdate({ set: values });
  await enqueue(
    tx,
    "screening.screen",
    { recordingId: request.recordingId },
    { priority: 20, key: `${request.recordingId}:${now.getTime()}` },
  );
}
