"use client";

import { useInfiniteQuery, useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { callApi } from "@/components/ui/api";
import { importAnswer, profileDetail, profilePage, revisionDetail, revisionPage } from "@/lib/contracts/profile";
import type { NewProfile, NewRevision } from "@/lib/contracts/profile";

const profilesKey = ["profiles"] as const;
const PAGE = 25;
/** A profile has tens of revisions at most on screen; older ones stay reachable by their number. */
const MOST_REVISIONS = 100;

export type ProfileWish = {
  readonly q: string;
  readonly mine: boolean;
  /** One of the owner's screens, to see only what it takes. */
  readonly fittingScreenId: string | null;
};

function listPath(wish: ProfileWish, cursor: string | null): string {
  const query = new URLSearchParams({ limit: String(PAGE) });
  if (wish.q !== "") query.set("q", wish.q);
  if (wish.mine) query.set("mine", "true");
  if (wish.fittingScreenId !== null) {
    query.set("screenId", wish.fittingScreenId);
    query.set("fitting", "true");
  }
  if (cursor !== null) query.set("cursor", cursor);
  return `/api/profiles?${query}`;
}

/** Shared profiles, or the owner's own, a page at a time. */
export function useProfiles(wish: ProfileWish) {
  return useInfiniteQuery({
    queryKey: [...profilesKey, "list", wish],
    initialPageParam: null as string | null,
    queryFn: ({ pageParam, signal }) => callApi(listPath(wish, pageParam), { shape: profilePage, signal }),
    getNextPageParam: (page) => page.nextCursor,
    placeholderData: (previous) => previous,
  });
}

export function useProfile(id: string) {
  return useQuery({
    queryKey: [...profilesKey, id],
    queryFn: ({ signal }) => callApi(`/api/profiles/${id}`, { shape: profileDetail, signal }),
  });
}

export function useRevisions(id: string) {
  return useQuery({
    queryKey: [...profilesKey, id, "revisions"],
    queryFn: async ({ signal }) =>
      (await callApi(`/api/profiles/${id}/revisions?limit=${MOST_REVISIONS}`, { shape: revisionPage, signal })).items,
  });
}

/** One revision's document; nothing is asked for while none is wanted. Revisions never change. */
export function useRevision(id: string, number: number | null) {
  return useQuery({
    queryKey: [...profilesKey, id, "revision", number],
    enabled: number !== null,
    staleTime: Infinity,
    queryFn: ({ signal }) => callApi(`/api/profiles/${id}/revisions/${number}`, { shape: revisionDetail, signal }),
  });
}

export function usePublish() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (profile: NewProfile) =>
      callApi("/api/profiles", { method: "POST", body: profile, shape: profileDetail }),
    onSuccess: () => client.invalidateQueries({ queryKey: profilesKey }),
  });
}

/** A revision after the one that it rests on; where somebody was there first the server says so. */
export function useAddRevision(id: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ after, ...revision }: NewRevision & { readonly after: number }) =>
      callApi(`/api/profiles/${id}/revisions`, {
        method: "POST",
        body: revision,
        ifMatch: `"${after}"`,
        shape: profileDetail,
      }),
    onSuccess: () => client.invalidateQueries({ queryKey: profilesKey }),
  });
}

/** Sends a file as it is: the server reads it, and says by path what is wrong with it. */
export function useImport() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (file: File) => callApi("/api/profiles/import", { method: "POST", file, shape: importAnswer }),
    onSuccess: () => client.invalidateQueries({ queryKey: profilesKey }),
  });
}

export function useSetVisibility(id: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (visibility: "private" | "shared") =>
      callApi(`/api/profiles/${id}`, { method: "PATCH", body: { visibility }, shape: profileDetail }),
    onSuccess: () => client.invalidateQueries({ queryKey: profilesKey }),
  });
}

export function useDeleteProfile(id: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => callApi(`/api/profiles/${id}`, { method: "DELETE" }),
    onSuccess: () => client.invalidateQueries({ queryKey: [...profilesKey, "list"] }),
  });
}
