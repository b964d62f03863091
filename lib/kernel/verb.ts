import { randomUUID } from "node:crypto";
import type { z } from "zod";
import { db, type Reader, type Tx } from "@/db/client";
import type { Actor, ActorKind, ActorOf } from "./actor";
import { type AuditEntry, findOperation, writeAudit } from "./audit";
import { businessNow } from "./clock";
import { Bug, Forbidden, Invalid, Unauthenticated } from "./errors";
import { inTransaction } from "./transaction";

/**
 * Every write is a `command`, every read a `query`: they are the only sources of a database handle.
 * Order inside a command, always: actor kind, parse, begin, guard rows, authorise, run, audit, commit.
 * `run` does no network call, because the whole transaction may be repeated; what must happen outside is a job.
 */
type Scope<K extends ActorKind, I> = { input: I; actor: ActorOf<K>; now: Date };

export interface CommandSpec<K extends ActorKind, I extends z.ZodType, S, R> {
  name: string;
  who: readonly K[];
  input: I;
  /** Locks (FOR UPDATE) and changes the rows that serialise this command, before anything else is read. */
  guard?: (context: Scope<K, z.output<I>> & { tx: Tx }) => Promise<void>;
  /** Loads the subject as far as this actor may have it, or throws. */
  authorise: (context: Scope<K, z.output<I>> & { tx: Tx }) => Promise<S>;
  audit: (context: Scope<K, z.output<I>> & { subject: S; result: R }) => AuditEntry;
  run: (context: Scope<K, z.output<I>> & { tx: Tx; subject: S }) => Promise<R>;
}

export interface QuerySpec<K extends ActorKind, I extends z.ZodType, S, R> {
  name: string;
  who: readonly K[];
  input: I;
  authorise: (context: Scope<K, z.output<I>> & { reader: Reader }) => Promise<S>;
  run: (context: Scope<K, z.output<I>> & { reader: Reader; subject: S }) => Promise<R>;
}

export interface Verb<I extends z.ZodType, R> {
  (actor: Actor, input: z.input<I>, options?: { operationId?: string }): Promise<R>;
  readonly verbName: string;
  readonly kind: "command" | "query";
  readonly who: readonly ActorKind[];
  readonly input: I;
}

// biome-ignore lint/suspicious/noExplicitAny: the registry holds verbs of every shape; callers keep their own types.
type AnyVerb = Verb<any, any>;
const registry = new Map<string, AnyVerb>();

/** All verbs whose room has been loaded, for the tests that hold the locks. */
export const registeredVerbs = (): ReadonlyMap<string, AnyVerb> => registry;

/** Marks a verb that anybody among its actor kinds may use, with the reason. */
export const open = (_reason: string) => async (): Promise<null> => null;

function admit<K extends ActorKind>(spec: { name: string; who: readonly K[] }, actor: Actor): ActorOf<K> {
  if ((spec.who as readonly ActorKind[]).includes(actor.kind)) return actor as ActorOf<K>;
  if (actor.kind === "anonymous") throw new Unauthenticated();
  throw new Forbidden(`This needs another role than the one in use (${actor.kind}).`);
}

function parse<I extends z.ZodType>(spec: { name: string; input: I }, raw: unknown): z.output<I> {
  const parsed = spec.input.safeParse(raw);
  if (parsed.success) return parsed.data;
  const fields: Record<string, string> = {};
  for (const issue of parsed.error.issues) fields[issue.path.join(".")] ??= issue.message;
  const first = parsed.error.issues[0];
  throw new Invalid(first ? first.message : "What was sent does not fit.", fields);
}

function publish<I extends z.ZodType, R>(
  spec: { name: string; who: readonly ActorKind[]; input: I },
  kind: "command" | "query",
  call: (actor: Actor, input: unknown, options?: { operationId?: string }) => Promise<R>,
): Verb<I, R> {
  const verb = Object.assign(call, { verbName: spec.name, kind, who: spec.who, input: spec.input }) as Verb<
    I,
    R
  >;
  registry.set(spec.name, verb);
  return verb;
}

export function command<const K extends ActorKind, I extends z.ZodType, S, R>(
  spec: CommandSpec<K, I, S, R>,
): Verb<I, R> {
  return publish(spec, "command", async (rawActor, rawInput, options) => {
    const actor = admit(spec, rawActor);
    const input = parse(spec, rawInput);
    const operationId = options?.operationId ?? randomUUID();
    const body = async (tx: Tx, attempt: number): Promise<R> => {
      const scope = { tx, input, actor, now: businessNow() };
      await spec.guard?.(scope);
      if (options?.operationId !== undefined || attempt > 0) {
        const done = await findOperation(tx, operationId);
        if (done && done.verb !== spec.name)
          throw new Bug(`operation ${operationId} was ${done.verb}, now ${spec.name}`);
        if (done) return done.result as R;
      }
      const subject = await spec.authorise(scope);
      const result = await spec.run({ ...scope, subject });
      const entry = spec.audit({ ...scope, subject, result });
      await writeAudit(tx, { operationId, verb: spec.name, actor, entry, result });
      return result;
    };
    if (options?.operationId === undefined) return inTransaction(body);
    return inTransaction(body, { again: "duplicate" }).catch(async (error: unknown) => {
      // The same operation may have been first while this one waited for a row, and changed what this one then found.
      const done = await findOperation(db(), operationId).catch(() => null);
      if (done?.verb === spec.name) return done.result as R;
      throw error;
    });
  });
}

export function query<const K extends ActorKind, I extends z.ZodType, S, R>(
  spec: QuerySpec<K, I, S, R>,
): Verb<I, R> {
  return publish(spec, "query", async (rawActor, rawInput) => {
    const actor = admit(spec, rawActor);
    const input = parse(spec, rawInput);
    const scope = { reader: db() as Reader, input, actor, now: businessNow() };
    const subject = await spec.authorise(scope);
    return spec.run({ ...scope, subject });
  });
}
