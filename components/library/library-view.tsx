"use client";

import { usePathname, useRouter } from "next/navigation";
import { useEffect, useState } from "react";
import { ImportButton } from "@/components/library/import-button";
import { ProfileTable } from "@/components/library/profile-table";
import { chosenScreen, useScreenOptions } from "@/components/library/use-my-screen";
import { useProfiles } from "@/components/library/use-profiles";
import { DemoNoteFor } from "@/components/shell/demo-people";
import { signInPath } from "@/components/shell/navigation";
import { useSignedIn } from "@/components/shell/signed-in";
import { Button, ButtonLink } from "@/components/ui/button";
import { Checkbox } from "@/components/ui/checkbox";
import { EmptyState } from "@/components/ui/empty-state";
import { inputLook, SelectField } from "@/components/ui/field";
import { formatCount } from "@/components/ui/figures";
import { PageHead } from "@/components/ui/page-head";
import { ProblemMessage } from "@/components/ui/problem-message";

export type LibraryWish = {
  readonly q: string;
  readonly screen: string | null;
  readonly mine: boolean;
  readonly fitting: boolean;
};

/** Time to finish a word before it is searched for. */
const TYPING_MS = 250;

/** Profiles, searched and held against a screen. The address holds the whole wish, so it can be shared. */
export function LibraryView({ wish }: { readonly wish: LibraryWish }) {
  const user = useSignedIn();
  const router = useRouter();
  const pathname = usePathname();
  const options = useScreenOptions();
  const screen = chosenScreen(options, wish.screen);
  const profiles = useProfiles({
    q: wish.q,
    mine: wish.mine && user !== null,
    fittingScreenId: wish.fitting ? screen.ownId : null,
  });
  const rows = profiles.data?.pages.flatMap((page) => page.items) ?? [];
  const go = (change: Partial<LibraryWish>) => {
    const next = { ...wish, ...change };
    const query = new URLSearchParams();
    if (next.q !== "") query.set("q", next.q);
    if (next.screen !== null) query.set("screen", next.screen);
    if (next.mine) query.set("mine", "true");
    if (next.fitting) query.set("fitting", "true");
    router.replace(query.size === 0 ? pathname : `${pathname}?${query}`, { scroll: false });
  };
  return (
    <div className="gutter flex flex-1 flex-col pb-10">
      <PageHead
        title="Library"
        lead="Profiles that work on somebody’s devices and screens. Each is checked against yours before anything is written."
        acts={
          <>
            <ImportButton />
            <ButtonLink kind="primary" href={user === null ? signInPath("/library/publish") : "/library/publish"}>
              Publish a backup
            </ButtonLink>
          </>
        }
      />
      <div className="grid grid-cols-1 items-end gap-x-4 gap-y-3 border-t border-line py-4 sm:grid-cols-[minmax(0,1fr)_minmax(180px,280px)] lg:grid-cols-[minmax(0,420px)_minmax(180px,280px)_auto_1fr]">
        <SearchField q={wish.q} onSearch={(q) => go({ q })} />
        <SelectField
          label="Hold against"
          options={options}
          value={screen.value}
          onChange={(event) => go({ screen: event.target.value, fitting: false })}
        />
        <div className="flex flex-wrap gap-x-5 pb-1.5">
          {screen.ownId === null ? null : (
            <Checkbox label="Only those that fit" checked={wish.fitting} onChange={(fitting) => go({ fitting })} />
          )}
          {user === null ? null : <Checkbox label="Only mine" checked={wish.mine} onChange={(mine) => go({ mine })} />}
        </div>
        <p aria-live="polite" className="pb-1.5 text-sm text-muted lg:text-right">
          {profiles.isPending
            ? "Loading"
            : `${formatCount(rows.length, "profile", "profiles")}${profiles.hasNextPage ? ", more below" : ""}`}
        </p>
      </div>
      {profiles.error === null ? null : (
        <ProblemMessage
          error={profiles.error}
          act={<Button onClick={() => void profiles.refetch()}>Try again</Button>}
        />
      )}
      {rows.length > 0 ? <ProfileTable rows={rows} screen={screen} /> : null}
      {profiles.isSuccess && rows.length === 0 ? (
        <NothingFound wish={wish} onClear={() => go({ q: "", mine: false, fitting: false })} />
      ) : null}
      <DemoNoteFor ownerIds={rows.map((row) => row.owner.id)} className="mt-6" />
      {profiles.hasNextPage ? (
        <Button
          className="mt-4 self-start"
          disabled={profiles.isFetchingNextPage}
          onClick={() => void profiles.fetchNextPage()}
        >
          Show more
        </Button>
      ) : null}
    </div>
  );
}

function SearchField({ q, onSearch }: { readonly q: string; readonly onSearch: (q: string) => void }) {
  const [typed, setTyped] = useState(q);
  const [sent, setSent] = useState(q);
  // The address changed without this field ("show all", the browser's back): it follows.
  if (q !== sent) {
    setSent(q);
    setTyped(q);
  }
  useEffect(() => {
    const wanted = typed.trim();
    if (wanted === sent) return undefined;
    const timer = setTimeout(() => onSearch(wanted), TYPING_MS);
    return () => clearTimeout(timer);
  }, [typed, sent, onSearch]);
  return (
    <div role="search" className="flex flex-col gap-1.5">
      <label htmlFor="library-search" className="font-strong">
        Search
      </label>
      <input
        id="library-search"
        type="search"
        maxLength={100}
        value={typed}
        placeholder="240 lines, upright"
        onChange={(event) => setTyped(event.target.value)}
        className={inputLook}
      />
    </div>
  );
}

function NothingFound({ wish, onClear }: { readonly wish: LibraryWish; readonly onClear: () => void }) {
  const isNarrow = wish.q !== "" || wish.mine || wish.fitting;
  return (
    <EmptyState
      title={isNarrow ? "Nothing matches" : "The library is empty"}
      act={isNarrow ? <Button onClick={onClear}>Show all profiles</Button> : undefined}
    >
      {isNarrow
        ? "No profile has all of these words, or fits this screen."
        : "Publish a backup of yours, or import a .porch.json file."}
    </EmptyState>
  );
}
