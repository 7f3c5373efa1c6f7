"use client";

import { QueryClient, QueryClientProvider } from "@tanstack/react-query";
import { setNonce } from "get-nonce";
import { Tooltip } from "radix-ui";
import { useState } from "react";
import type { ReactNode } from "react";
import { ApiProblem } from "@/components/ui/api";
import { ToastProvider } from "@/components/ui/toast";
import { LinkStateProvider } from "@/components/shell/link-state";

/** A lost answer is asked for again this often; an answer that says no is not. */
const MAX_RETRIES = 2;

function makeClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      queries: {
        staleTime: 15_000,
        retry: (failures, error) =>
          failures < MAX_RETRIES &&
          error instanceof ApiProblem &&
          (error.problem.status === 0 || error.problem.status >= 500),
      },
    },
  });
}

/** What every page stands in: the cache of server data, notices, tooltips, the state of the link. */
export function Providers({ nonce, children }: { readonly nonce: string | undefined; readonly children: ReactNode }) {
  // The dialogs' scroll lock makes a style element of its own, and the policy wants its nonce: that of the document,
  // not of a later answer that only renders a part of it anew.
  const [documentNonce] = useState(nonce);
  if (documentNonce !== undefined) setNonce(documentNonce);
  const [client] = useState(makeClient);
  return (
    <QueryClientProvider client={client}>
      <Tooltip.Provider>
        <ToastProvider>
          <LinkStateProvider>{children}</LinkStateProvider>
        </ToastProvider>
      </Tooltip.Provider>
    </QueryClientProvider>
  );
}
