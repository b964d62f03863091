import { cachedMaster, type MasterKey, releaseLayers } from "@/fixtures/audio";
import { serveThread } from "@/lib/kernel/thread-side";

serveThread({
  render: (args: { folder: string; key: MasterKey; last?: boolean }) => {
    const path = cachedMaster(args.folder, args.key);
    if (args.last) releaseLayers();
    return path;
  },
});
