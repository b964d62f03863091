import { defineHandlers } from "@/lib/jobs";
import { system } from "@/lib/kernel/actor";
import { markMailSent, readMail } from "./mark-sent";
import { send } from "./send";

const actor = system("mail.send");

export const mailHandlers = defineHandlers({
  "mail.send": {
    timeoutS: 60,
    handle: async ({ mailId }) => {
      const mail = await readMail(actor, { mailId });
      if (mail.state === "sent") return;
      const sent = await send({
        template: mail.template as never,
        props: mail.props as never,
        to: mail.toAddress,
        idempotencyKey: mail.id,
      });
      await markMailSent(
        actor,
        { mailId, providerId: sent.providerId },
        { operationId: `mail:${mailId}:sent` },
      );
    },
  },
});
