import type { ContainerFacts } from "./container-facts";
import { openFileSource } from "./file-source";
import { probeSource } from "./probe-source";

/** probeSource for a path. See there. */
export async function probe(path: string): Promise<ContainerFacts> {
  const source = await openFileSource(path);
  try {
    return await probeSource(source);
  } finally {
    await source.close();
  }
}
