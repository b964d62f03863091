import type { Metadata } from "next";
import { notFound, redirect } from "next/navigation";
import { DeliveryDesk } from "@/components/deliveries/delivery-desk";
import { getAccount } from "@/lib/accounts";
import { isSignedIn } from "@/lib/kernel/actor";
import { businessNow } from "@/lib/kernel/clock";
import { Expected } from "@/lib/kernel/errors";
import { viewer } from "@/lib/web";
import { readDelivery } from "./read-delivery";

export const metadata: Metadata = { title: "Delivery" };

export default async function DeliveryPage({ params }: { params: Promise<{ id: string }> }) {
  const { id } = await params;
  const { actor, person } = await viewer();
  if (!person || !isSignedIn(actor)) redirect(`/sign-in?to=${encodeURIComponent(`/deliveries/${id}`)}`);
  const first = await readDelivery(actor, id).catch((error: unknown) => {
    if (error instanceof Expected && error.code === "not_found") return notFound();
    throw error;
  });
  const { timeZone } = await getAccount(actor, {});
  return <DeliveryDesk first={first} now={businessNow().getTime()} zone={timeZone} />;
}
