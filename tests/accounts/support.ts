import { desc, eq } from "drizzle-orm";
import { expect } from "vitest";
import { db } from "@/db/client";
import { mailOutbox } from "@/db/schema/infrastructure";
import type { ActorOf } from "@/lib/kernel/actor";
import { makePerson } from "@/tests/support/make";

export const GOOD_PASSWORD = "lantern tideline heron attic";

export async function lastMailTo(address: string) {
  const [mail] = await db()
    .select()
    .from(mailOutbox)
    .where(eq(mailOutbox.toAddress, address))
    .orderBy(desc(mailOutbox.id))
    .limit(1);
  expect(mail, `a mail to ${address}`).toBeDefined();
  return mail!;
}

export async function tokenMailedTo(address: string): Promise<string> {
  const { props } = await lastMailTo(address);
  const url = new URL(String(props.url));
  return url.searchParams.get("token") ?? url.pathname.split("/").at(-1) ?? "";
}

export const recently = () => new Date().toISOString();

export async function ownerOf(
  libraryId: string,
  secondFactorAt: string | null = recently(),
): Promise<ActorOf<"owner">> {
  const person = await makePerson();
  return { kind: "owner", libraryId, personId: person.id, name: person.name, secondFactorAt };
}

export async function adminActor(secondFactorAt: string | null = recently()): Promise<ActorOf<"admin">> {
  const person = await makePerson();
  return { kind: "admin", personId: person.id, name: person.name, secondFactorAt };
}
