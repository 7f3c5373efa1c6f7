"use client";

import { queryOptions, useInfiniteQuery, useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { callApi } from "@/components/ui/api";
import { backupComparison, backupDetail, backupPage, backupView } from "@/lib/contracts/backup";
import type { BackupView } from "@/lib/contracts/backup";
import { devicePage, deviceView } from "@/lib/contracts/device";
import type { DeviceChange, DeviceView } from "@/lib/contracts/device";

const devicesKey = ["devices"] as const;
const backupsKey = ["backups"] as const;
/** Devices of one owner fit on one page of a list. */
const MOST_DEVICES = 100;
const PAGE = 50;

export function useDevices(enabled = true) {
  return useQuery({
    queryKey: devicesKey,
    enabled,
    queryFn: async ({ signal }) =>
      (await callApi(`/api/devices?limit=${MOST_DEVICES}`, { shape: devicePage, signal })).items,
  });
}

/** A device's backups, latest first, a page at a time. */
export function useBackups(deviceId: string | null) {
  return useInfiniteQuery({
    queryKey: [...backupsKey, "of", deviceId],
    enabled: deviceId !== null,
    initialPageParam: null as string | null,
    queryFn: ({ pageParam, signal }) =>
      callApi(
        `/api/devices/${deviceId}/backups?limit=${PAGE}${pageParam === null ? "" : `&cursor=${encodeURIComponent(pageParam)}`}`,
        { shape: backupPage, signal },
      ),
    getNextPageParam: (page) => page.nextCursor,
  });
}

/** What asks for one backup; nothing is asked for without an id. */
export function backupQuery(id: string | null) {
  return queryOptions({
    queryKey: [...backupsKey, id],
    enabled: id !== null,
    queryFn: ({ signal }) => callApi(`/api/backups/${id}`, { shape: backupDetail, signal }),
  });
}

/** A backup with all that it holds. Its content never changes; its name and pin may. */
export function useBackup(id: string | null) {
  return useQuery(backupQuery(id));
}

/** What changed from one backup to another; nothing is asked for while one is missing or both are the same. */
export function useBackupComparison(left: string | null, right: string | null) {
  return useQuery({
    queryKey: [...backupsKey, "comparison", left, right],
    enabled: left !== null && right !== null && left !== right,
    staleTime: Infinity,
    queryFn: ({ signal }) => callApi(`/api/backups/${left}/compare?with=${right}`, { shape: backupComparison, signal }),
  });
}

/** Devices say which backup is their last and whether it differs, so both lists are read again. */
function useReadAgain() {
  const client = useQueryClient();
  return async () => {
    await Promise.all([
      client.invalidateQueries({ queryKey: backupsKey }),
      client.invalidateQueries({ queryKey: devicesKey }),
    ]);
  };
}

export function useRenameBackup() {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: ({ backup, name }: { readonly backup: BackupView; readonly name: string }) =>
      callApi(`/api/backups/${backup.id}`, {
        method: "PATCH",
        body: { name },
        ifMatch: `"${backup.version}"`,
        shape: backupView,
      }),
    onSuccess,
  });
}

export function usePinBackup() {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: ({ backup, pinned }: { readonly backup: BackupView; readonly pinned: boolean }) =>
      callApi(`/api/backups/${backup.id}/known-good`, { method: pinned ? "PUT" : "DELETE", shape: backupView }),
    onSuccess,
  });
}

export function useDeleteBackup() {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: (backup: BackupView) => callApi(`/api/backups/${backup.id}`, { method: "DELETE" }),
    onSuccess,
  });
}

export function useUndeleteBackup() {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: (id: string) => callApi(`/api/backups/${id}/undelete`, { method: "POST", shape: backupView }),
    onSuccess,
  });
}

export function useChangeDevice() {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: ({ device, change }: { readonly device: DeviceView; readonly change: DeviceChange }) =>
      callApi(`/api/devices/${device.id}`, {
        method: "PATCH",
        body: change,
        ifMatch: `"${device.version}"`,
        shape: deviceView,
      }),
    onSuccess,
  });
}

export function useDeleteDevice() {
  const onSuccess = useReadAgain();
  return useMutation({
    mutationFn: (device: DeviceView) => callApi(`/api/devices/${device.id}`, { method: "DELETE" }),
    onSuccess,
  });
}
