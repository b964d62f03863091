import { libraries } from "@/db/schema/catalogue";
import { newId } from "@/lib/kernel/ids";
import { command, open } from "@/lib/kernel/verb";
import { CreateLibrary } from "./schemas";

export const createLibrary = command({
  name: "catalogue.createLibrary",
  who: ["admin", "system"],
  input: CreateLibrary,
  authorise: open("admins and the commands set libraries up"),
  run: async ({ tx, input, now }) => {
    const libraryId = newId("lib");
    await tx.insert(libraries).values({ id: libraryId, ...input, createdAt: now });
    return { libraryId };
  },
  audit: ({ input, result }) => ({
    subject: result.libraryId,
    libraryId: result.libraryId,
    detail: { code: input.code },
  }),
});
