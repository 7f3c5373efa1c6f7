"use client";

import { useDrivers } from "@/components/drivers/use-drivers";
import { shippedDrivers } from "@/lib/serial/drivers/shipped";
import { useBenchAccount } from "@/components/bench/bench-provider";

export type Model = { readonly slug: string; readonly maker: string; readonly model: string };

/** Device models that can be connected: what came with the program, then for who is signed in all others with a published driver. */
export function useModels(): readonly Model[] {
  const account = useBenchAccount();
  const drivers = useDrivers();
  if (account === null) return shippedDrivers;
  const published = drivers.data?.pages.flatMap(({ items }) => items).filter(({ latest }) => latest !== null) ?? [];
  const others = published.filter(({ slug }) => !shippedDrivers.some((shipped) => shipped.slug === slug));
  return [...shippedDrivers, ...others];
}
