"use client";

import { useInfiniteQuery, useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { callApi } from "@/components/ui/api";
import { conformanceDetail } from "@/lib/contracts/conformance";
import {
  driverPage,
  driverVersionDetail,
  driverVersionPage,
  driverVersionView,
  versionComparison,
} from "@/lib/contracts/driver";
import type { DraftChange, NewDriverVersion } from "@/lib/contracts/driver";

const driversKey = ["drivers"] as const;
const PAGE = 50;

export type VersionKey = { readonly slug: string; readonly version: string };

const versionsPath = (slug: string) => `/api/drivers/${encodeURIComponent(slug)}/versions`;
const versionPath = ({ slug, version }: VersionKey) => `${versionsPath(slug)}/${encodeURIComponent(version)}`;

/** Device models by maker and model, a page at a time. */
export function useDrivers() {
  return useInfiniteQuery({
    queryKey: [...driversKey, "list"],
    initialPageParam: null as string | null,
    queryFn: ({ pageParam, signal }) =>
      callApi(`/api/drivers?limit=${PAGE}${pageParam === null ? "" : `&cursor=${encodeURIComponent(pageParam)}`}`, {
        shape: driverPage,
        signal,
      }),
    getNextPageParam: (page) => page.nextCursor,
  });
}

/** A driver's versions, highest first, a page at a time. */
export function useVersions(slug: string, enabled = true) {
  return useInfiniteQuery({
    queryKey: [...driversKey, slug, "versions"],
    enabled,
    initialPageParam: null as string | null,
    queryFn: ({ pageParam, signal }) =>
      callApi(
        `${versionsPath(slug)}?limit=${PAGE}${pageParam === null ? "" : `&cursor=${encodeURIComponent(pageParam)}`}`,
        { shape: driverVersionPage, signal },
      ),
    getNextPageParam: (page) => page.nextCursor,
  });
}

/** A version with its definition; nothing is asked for while none is named. */
export function useVersion(key: VersionKey | null) {
  return useQuery({
    queryKey: [...driversKey, key?.slug, "version", key?.version],
    enabled: key !== null,
    queryFn: ({ signal }) => callApi(key === null ? "" : versionPath(key), { shape: driverVersionDetail, signal }),
  });
}

/** What differs from one version to another; nothing is asked for while one is missing or both are the same. */
export function useVersionComparison(left: VersionKey, right: string | null) {
  return useQuery({
    queryKey: [...driversKey, left.slug, "comparison", left.version, right],
    enabled: right !== null && right !== left.version,
    queryFn: ({ signal }) =>
      callApi(`${versionPath(left)}/comparison?with=${encodeURIComponent(right ?? "")}`, {
        shape: versionComparison,
        signal,
      }),
  });
}

/** A report never changes. */
export function useReport(id: string | null) {
  return useQuery({
    queryKey: [...driversKey, "report", id],
    enabled: id !== null,
    staleTime: Infinity,
    queryFn: ({ signal }) => callApi(`/api/conformance/${id}`, { shape: conformanceDetail, signal }),
  });
}

/** Lists, versions and comparisons are read again after an act on any of them. */
function useReadAgain() {
  const client = useQueryClient();
  return () => client.invalidateQueries({ queryKey: driversKey });
}

export function useNewVersion(slug: string) {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: (body: NewDriverVersion) =>
      callApi(versionsPath(slug), { method: "POST", body, shape: driverVersionDetail }),
    onSuccess,
  });
}

/** Sends a file as it is: the server reads it, and says by path what is wrong with it. */
export function useImportDriver() {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: (file: File) => callApi("/api/drivers/import", { method: "POST", file, shape: driverVersionDetail }),
    onSuccess,
  });
}

/** Changes a draft after the revision that the text rests on; where somebody was there first the server says so. */
export function useChangeDraft(key: VersionKey) {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: ({ revision, ...body }: DraftChange & { readonly revision: number }) =>
      callApi(versionPath(key), { method: "PUT", body, ifMatch: `"${revision}"`, shape: driverVersionDetail }),
    onSuccess,
  });
}

export function useDiscardDraft(key: VersionKey) {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: (revision: number) => callApi(versionPath(key), { method: "DELETE", ifMatch: `"${revision}"` }),
    onSuccess,
  });
}

/** The server runs the suite on what is stored there; that takes some seconds. */
export function useRunConformance(key: VersionKey) {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: () => {
      const { slug, version } = key;
      return callApi("/api/conformance", { method: "POST", body: { slug, version }, shape: conformanceDetail });
    },
    onSuccess,
  });
}

export function usePublishVersion(key: VersionKey) {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: (revision: number) =>
      callApi(`${versionPath(key)}/publication`, {
        method: "POST",
        ifMatch: `"${revision}"`,
        shape: driverVersionView,
      }),
    onSuccess,
  });
}

export function useWithdrawVersion(key: VersionKey) {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: ({ revision, reason }: { readonly revision: number; readonly reason: string }) =>
      callApi(`${versionPath(key)}/withdrawal`, {
        method: "POST",
        body: { reason },
        ifMatch: `"${revision}"`,
        shape: driverVersionView,
      }),
    onSuccess,
  });
}
