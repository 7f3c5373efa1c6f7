import { ApiProblem } from "@/components/ui/api";

/** A problem as the reader meets it. */
export type ProblemText = {
  /** The fact, a sentence. */
  readonly fact: string;
  /** What to do, where more can be said. */
  readonly detail?: string | undefined;
  readonly errors: readonly { readonly path: string; readonly message: string }[];
  /** To quote when asking for help; only where the server itself failed. */
  readonly requestId?: string | undefined;
};

const factByStatus: Readonly<Record<number, string>> = {
  0: "The server did not answer.",
  401: "You are signed out.",
  403: "This belongs to somebody else.",
  404: "This is not here any more.",
  409: "Something else got there first.",
  412: "This was changed in the meantime.",
  413: "This is too large.",
  428: "This was changed in the meantime.",
  429: "That was too often in a short time.",
  503: "The server cannot do this just now.",
};

const wayOutByStatus: Readonly<Record<number, string>> = {
  401: "Sign in again; what you typed stays here.",
  412: "Load the page again to see the newer state.",
  428: "Load the page again to see the newer state.",
  429: "Wait a minute, then try again.",
  500: "Try again. If it fails again, tell whoever runs this site the number below.",
};

/** What an error of a request means to the reader. Anything but an ApiProblem is a fault of the page itself. */
export function problemText(error: unknown): ProblemText {
  if (!(error instanceof ApiProblem)) {
    return { fact: "This page failed.", detail: "Load it again.", errors: [] };
  }
  const { problem } = error;
  const title = /[.?]$/u.test(problem.title) ? problem.title : `${problem.title}.`;
  return {
    fact: factByStatus[problem.status] ?? title,
    detail: problem.detail ?? wayOutByStatus[problem.status],
    errors: problem.errors ?? [],
    requestId: problem.status >= 500 ? problem.requestId : undefined,
  };
}
