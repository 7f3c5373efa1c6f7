"use client";

import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { useSignedIn } from "@/components/shell/signed-in";
import { callApi } from "@/components/ui/api";
import { deviceView } from "@/lib/contracts/device";
import { driverMovePreview, driverNoticeList } from "@/lib/contracts/driver";

const noticesKey = ["driver-notices"] as const;

/** The signed-in owner's devices whose driver has a new version, or whose version was withdrawn. */
export function useNotices() {
  const user = useSignedIn();
  return useQuery({
    queryKey: noticesKey,
    enabled: user !== null,
    queryFn: async ({ signal }) => (await callApi("/api/driver-notices", { shape: driverNoticeList, signal })).items,
  });
}

/** What another version would make of the device's last backup. */
export function useMovePreview(deviceId: string, to: string | null) {
  return useQuery({
    queryKey: [...noticesKey, "preview", deviceId, to],
    enabled: to !== null,
    queryFn: ({ signal }) =>
      callApi(`/api/devices/${deviceId}/driver?to=${encodeURIComponent(to ?? "")}`, {
        shape: driverMovePreview,
        signal,
      }),
  });
}

/** `driver` moves the device; `driver-notice` puts the notice aside and leaves the device as it is. */
export function useAnswerNotice(deviceId: string, answer: "driver" | "driver-notice") {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (version: string) =>
      callApi(`/api/devices/${deviceId}/${answer}`, { method: "PUT", body: { version }, shape: deviceView }),
    onSuccess: async () => {
      await Promise.all([
        client.invalidateQueries({ queryKey: noticesKey }),
        client.invalidateQueries({ queryKey: ["devices"] }),
      ]);
    },
  });
}
