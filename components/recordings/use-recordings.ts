"use client";

import { useInfiniteQuery, useMutation, useQuery, useQueryClient } from "@tanstack/react-query";
import { ApiProblem, callApi } from "@/components/ui/api";
import { questionPage, questionView, recordingPage, recordingView } from "@/lib/contracts/recording";
import type { NewQuestion, RecordingView } from "@/lib/contracts/recording";
import { parseRecording } from "@/lib/serial/recording";
import type { Recording } from "@/lib/serial/recording";

const recordingsKey = ["recordings"] as const;
const questionsKey = ["driver-questions"] as const;
const PAGE = 50;

const withCursor = (path: string, cursor: string | null) =>
  cursor === null ? path : `${path}&cursor=${encodeURIComponent(cursor)}`;

/** One's own recordings, latest first; for maintainers also those attached to a question. */
export function useRecordings(slug: string | null, enabled = true) {
  return useInfiniteQuery({
    queryKey: [...recordingsKey, "list", slug],
    enabled,
    initialPageParam: null as string | null,
    queryFn: ({ pageParam, signal }) =>
      callApi(
        withCursor(
          `/api/recordings?limit=${PAGE}${slug === null ? "" : `&slug=${encodeURIComponent(slug)}`}`,
          pageParam,
        ),
        { shape: recordingPage, signal },
      ),
    getNextPageParam: (page) => page.nextCursor,
  });
}

export function useRecording(id: string) {
  return useQuery({
    queryKey: [...recordingsKey, id],
    queryFn: ({ signal }) => callApi(`/api/recordings/${id}`, { shape: recordingView, signal }),
  });
}

async function readFile(id: string, signal: AbortSignal): Promise<Recording> {
  const response = await fetch(`/api/recordings/${id}/file`, { signal, credentials: "same-origin" });
  const text = await response.text();
  const parsed = response.ok ? parseRecording(text) : null;
  if (parsed?.ok === true) return parsed.value;
  const title = response.ok ? "The recording cannot be read." : "The recording did not come.";
  throw new ApiProblem({ type: "about:blank", title, status: response.ok ? 422 : response.status });
}

/** The lines of a recording; they never change. Nothing is asked for while none is named. */
export function useRecordingLines(id: string | null) {
  return useQuery({
    queryKey: [...recordingsKey, id, "lines"],
    enabled: id !== null,
    staleTime: Infinity,
    queryFn: ({ signal }) => readFile(id ?? "", signal),
  });
}

export type Upload = { readonly file: Blob; readonly name: string; readonly strikeOut: boolean };

export function useUploadRecording() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ file, name, strikeOut }: Upload) =>
      callApi(`/api/recordings?${new URLSearchParams({ name, strikeOut: String(strikeOut) })}`, {
        method: "POST",
        file,
        shape: recordingView,
      }),
    onSuccess: () => client.invalidateQueries({ queryKey: recordingsKey }),
  });
}

export function useDeleteRecording() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ id }: RecordingView) => callApi(`/api/recordings/${id}`, { method: "DELETE" }),
    onSuccess: () => client.invalidateQueries({ queryKey: recordingsKey }),
  });
}

/** One's own questions about a driver, for maintainers everybody's, latest first. */
export function useQuestions(slug: string, enabled: boolean) {
  return useInfiniteQuery({
    queryKey: [...questionsKey, slug],
    enabled,
    initialPageParam: null as string | null,
    queryFn: ({ pageParam, signal }) =>
      callApi(withCursor(`/api/drivers/${encodeURIComponent(slug)}/questions?limit=${PAGE}`, pageParam), {
        shape: questionPage,
        signal,
      }),
    getNextPageParam: (page) => page.nextCursor,
  });
}

export function useAsk(slug: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: NewQuestion) =>
      callApi(`/api/drivers/${encodeURIComponent(slug)}/questions`, { method: "POST", body, shape: questionView }),
    onSuccess: async () => {
      await Promise.all([
        client.invalidateQueries({ queryKey: questionsKey }),
        client.invalidateQueries({ queryKey: recordingsKey }),
      ]);
    },
  });
}

export function useAnswer() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ id, text }: { readonly id: string; readonly text: string }) =>
      callApi(`/api/driver-questions/${id}/answer`, { method: "PUT", body: { text }, shape: questionView }),
    onSuccess: async () => {
      await Promise.all([
        client.invalidateQueries({ queryKey: questionsKey }),
        client.invalidateQueries({ queryKey: ["drivers"] }),
      ]);
    },
  });
}
