import type { Readable } from "node:stream";

/**
 * A stored file's bytes as the body of a Response. Readable.toWeb closes its controller twice when a listener goes away
 * in the middle, and nothing catches that; this one simply stops reading.
 */
export function webBody(stored: Readable): ReadableStream<Uint8Array> {
  const parts = stored[Symbol.asyncIterator]() as AsyncIterator<Uint8Array>;
  let isLeft = false;
  return new ReadableStream<Uint8Array>({
    async pull(controller) {
      try {
        const { done, value } = await parts.next();
        if (isLeft) return;
        if (done) controller.close();
        else controller.enqueue(value);
      } catch (error) {
        if (!isLeft) controller.error(error);
      }
    },
    cancel() {
      isLeft = true;
      stored.destroy();
    },
  });
}
