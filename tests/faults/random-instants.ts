import { randomInt } from "node:crypto";
import { createRandom } from "@/fixtures/audio/prng";

/**
 * Instants at which something is killed. The seed is printed; FAULT_SEED repeats a run's instants, though never what the
 * machine was doing at them.
 */
export function randomInstants(title: string): { nextMs: (upToMs: number) => number } {
  const seed = Number(process.env.FAULT_SEED ?? randomInt(1_000_000));
  process.stdout.write(`${title}: FAULT_SEED=${seed}\n`);
  const random = createRandom(seed);
  return { nextMs: (upToMs) => random() * upToMs };
}

export const sleep = (ms: number) => new Promise<void>((resolve) => setTimeout(resolve, ms));
