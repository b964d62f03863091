import { z } from "zod";
import { enqueue } from "@/lib/jobs";
import { system } from "@/lib/kernel/actor";
import { env } from "@/lib/kernel/env";
import { command, open } from "@/lib/kernel/verb";
import { cues } from "./data/cues";

/** What the first look needs comes first: full mixes, loops and a reported work, then the cases on them. */
const FIRST_CUES = [1, 2, 3, 4, 8, 9, 10, 17, 19, 21, 24, 30, 36, 37];
const FIRST_CASES = ["P-01", "P-07", "P-10", "P-13", "P-16", "P-27"];
const LATER_CASES = ["P-02", "P-04", "P-12", "P-17", "P-25"];

const others = cues.map((cue) => cue.number).filter((number) => !FIRST_CUES.includes(number));

const everything = env.DEMO_CUES >= cues.length;

export const plan: readonly string[] = [
  "loop:LP-003",
  "loop:LP-007",
  "reported:RW-02",
  ...FIRST_CUES.map((number) => `cue:${number}`),
  "hold:RW-01",
  ...FIRST_CASES.map((id) => `case:${id}`),
  "sale:O-1041",
  "licences:brought-in",
  ...(everything
    ? [
        ...others.map((number) => `cue:${number}`),
        ...LATER_CASES.map((id) => `case:${id}`),
        ...[...FIRST_CUES, ...others].map((number) => `versions:${number}`),
      ]
    : []),
];

/** A turn of the plan as a job: the same turn is one job, whoever asks for it. */
export const planStep = command({
  name: "demo.planStep",
  who: ["system"],
  input: z.object({
    item: z.string(),
    priority: z.int(),
    inS: z.number().min(0).default(0),
    deliveryId: z.string().nullable().default(null),
    turn: z.int().default(0),
  }),
  authorise: open("only the demonstration's own steps"),
  run: async ({ tx, input }) => {
    const { item, priority, turn, deliveryId } = input;
    const options = {
      priority,
      runAt: new Date(Date.now() + input.inS * 1000),
      key: `${item}:${turn}`,
      attemptsMax: 40,
    };
    if (deliveryId) await enqueue(tx, "demo.seeThrough", { item, deliveryId, turn }, options);
    else await enqueue(tx, "demo.bring", { item }, options);
    return null;
  },
  audit: ({ input }) => ({ subject: input.item }),
});

export const planner = system("demonstration");

/** Earlier items have lower numbers and so go first; background work of the product itself comes before them. */
export const priorityOf = (item: string): number =>
  40 + Math.min(40, Math.floor((plan.indexOf(item) / plan.length) * 40));
