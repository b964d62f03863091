import type { DemoWorld } from "./world";

export async function firstSale(_world: DemoWorld): Promise<void> {}
export async function broughtInLicences(_world: DemoWorld): Promise<void> {}
