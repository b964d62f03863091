import { db } from "@/db/client";
import { mailOutbox } from "@/db/schema/infrastructure";
import { newId } from "@/lib/kernel/ids";
import type { Rows } from "../columns";

const makeMail = async () => {
  const id = newId("mai");
  await db()
    .insert(mailOutbox)
    .values({
      id,
      toAddress: "a@b.example",
      template: "sign-in-link",
      props: {},
      subjectId: id,
      state: "waiting",
      createdAt: new Date(),
    });
  return id;
};

export const rows = {
  "mail.readMail": { input: async () => ({ mailId: await makeMail() }), may: ["system"] },
  "mail.markMailSent": {
    input: async () => ({ mailId: await makeMail(), providerId: "x" }),
    may: ["system"],
  },
} satisfies Rows;
