import { closeDb } from "@/db/client";
import { DEMO_PASSWORD } from "@/lib/accounts";
import { env } from "@/lib/kernel/env";
import { plan, planner, planStep, priorityOf } from "./plan";
import { demoWorld } from "./world";

/*
 * The demonstration's people at once, and the plan of what the worker brings. It runs at every start and changes nothing
 * the second time. Its last line is JSON: one sign-in per role.
 */
const SIGN_INS = [
  ["composer", "A"],
  ["library owner", "morag"],
  ["moderator at Saltmarrow", "ruan"],
  ["moderator for the marketplace", "solveig"],
  ["buyer, proposes", "noor"],
  ["buyer, approves and pays", "beatrix"],
  ["accountant at Saltmarrow", "desmond"],
  ["accountant for the marketplace", "mirela"],
  ["admin", "otto"],
] as const;

if (env.SEDGEWREN_MODE !== "demo") throw new Error("the demonstration's world is for demo mode only");

const world = await demoWorld();
for (const item of plan)
  await planStep(planner, { item, priority: priorityOf(item) }, { operationId: `demo:plan:${item}` });
const signIns = SIGN_INS.map(([role, key]) => {
  const person = world.people.get(key);
  return { role, name: person?.name, email: person?.email, password: DEMO_PASSWORD };
});
process.stdout.write(`${JSON.stringify({ signIns })}\n`);
await closeDb();
