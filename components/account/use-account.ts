"use client";

import { useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { callApi } from "@/components/ui/api";
import { accountView, sessionList, sessionsRevoked } from "@/lib/contracts/account";
import type { AccountChange, PasswordChange } from "@/lib/contracts/account";

const accountKey = ["account"] as const;
const sessionsKey = ["sessions"] as const;

export function useAccount() {
  return useQuery({
    queryKey: accountKey,
    queryFn: ({ signal }) => callApi("/api/account", { shape: accountView, signal }),
  });
}

export function useRenameAccount() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (change: AccountChange) =>
      callApi("/api/account", { method: "PATCH", body: change, shape: accountView }),
    onSuccess: (account) => client.setQueryData(accountKey, account),
  });
}

export function useChangePassword() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (change: PasswordChange) =>
      callApi("/api/account/password", { method: "PUT", body: change, shape: sessionsRevoked }),
    onSuccess: () => client.invalidateQueries({ queryKey: sessionsKey }),
  });
}

export function useSessions() {
  return useQuery({
    queryKey: sessionsKey,
    queryFn: ({ signal }) => callApi("/api/sessions", { shape: sessionList, signal }),
  });
}

export function useRevokeSession() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (id: string) => callApi(`/api/sessions/${id}`, { method: "DELETE" }),
    onSuccess: () => client.invalidateQueries({ queryKey: sessionsKey }),
  });
}

export function useRevokeOthers() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => callApi("/api/sessions", { method: "DELETE", shape: sessionsRevoked }),
    onSuccess: () => client.invalidateQueries({ queryKey: sessionsKey }),
  });
}
