"use client";

import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { callApi } from "@/components/ui/api";
import { screenPage, screenView } from "@/lib/contracts/screen";
import type { NewScreen, ScreenChange, ScreenView } from "@/lib/contracts/screen";
import { useSignedIn } from "@/components/shell/signed-in";

const screensKey = ["screens"] as const;
/** An owner has a room full of screens, not a warehouse: one page holds them. */
const MOST_SCREENS = 100;

/** The owner's screens by name. Nothing is asked for while nobody is signed in. */
export function useScreens() {
  const user = useSignedIn();
  return useQuery({
    queryKey: screensKey,
    enabled: user !== null,
    queryFn: async ({ signal }) =>
      (await callApi(`/api/screens?limit=${MOST_SCREENS}`, { shape: screenPage, signal })).items,
  });
}

export function useScreen(id: string) {
  return useQuery({
    queryKey: [...screensKey, id],
    queryFn: ({ signal }) => callApi(`/api/screens/${id}`, { shape: screenView, signal }),
  });
}

export function useAddScreen() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (screen: NewScreen) => callApi("/api/screens", { method: "POST", body: screen, shape: screenView }),
    onSuccess: () => client.invalidateQueries({ queryKey: screensKey }),
  });
}

export function useChangeScreen(id: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ change, version }: { readonly change: ScreenChange; readonly version: number }) =>
      callApi(`/api/screens/${id}`, { method: "PATCH", body: change, ifMatch: `"${version}"`, shape: screenView }),
    onSuccess: () => client.invalidateQueries({ queryKey: screensKey }),
  });
}

export function useDeleteScreen() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (screen: ScreenView) => callApi(`/api/screens/${screen.id}`, { method: "DELETE" }),
    onSuccess: () => client.invalidateQueries({ queryKey: screensKey }),
  });
}
