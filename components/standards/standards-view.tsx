"use client";

import Link from "next/link";
import { useCallback, useDeferredValue, useMemo } from "react";
import { chosenScreen, useScreenOptions } from "@/components/library/use-my-screen";
import { CompareView } from "@/components/standards/compare-view";
import { entryWords, standardRows } from "@/components/standards/standard-rows";
import { readStandards, togglePick, writeStandards } from "@/components/standards/standards-address";
import { StandardsFilters } from "@/components/standards/standards-filters";
import { StandardsTable } from "@/components/standards/standards-table";
import { Button } from "@/components/ui/button";
import { EmptyState } from "@/components/ui/empty-state";
import { FootBar } from "@/components/ui/foot-bar";
import { PageHead } from "@/components/ui/page-head";
import { useAddress } from "@/components/ui/use-address";
import { catalogueEntry } from "@/lib/timing/catalogue/search-catalogue";

const everything = { text: "", lines: "", rate: "", document: "", fitting: false };

/** Published rasters: searched, held against a screen, two of them compared. The address holds all of it. */
export function StandardsView() {
  const [state, change] = useAddress(readStandards, writeStandards);
  const options = useScreenOptions();
  const screen = chosenScreen(options, state.screen);
  const shown = useDeferredValue(state);
  const rows = useMemo(() => standardRows(shown, screen.envelope), [shown, screen.envelope]);
  const onPick = useCallback((id: string) => change({ picked: togglePick(state.picked, id) }), [change, state.picked]);
  const picked = state.picked.flatMap((id) => catalogueEntry(id) ?? []);
  const [left, right] = picked;
  if (state.comparing && left !== undefined && right !== undefined) {
    return (
      <CompareView
        left={left}
        right={right}
        laid={state.laid}
        screen={screen}
        options={options}
        onChange={change}
        onBack={() => change({ comparing: false }, "step")}
      />
    );
  }
  return (
    <div className="flex flex-1 flex-col">
      <div className="gutter flex flex-1 flex-col pb-8">
        <PageHead
          title="Standards"
          above={
            <Link href="/screens" className="link">
              Screens
            </Link>
          }
          lead="Rasters that CTA-861, VESA and ITU-R print, with the figures of each. Tick two to compare them."
        />
        <StandardsFilters state={state} options={options} screen={screen} found={rows.length} onChange={change} />
        {rows.length > 0 ? (
          <StandardsTable
            rows={rows}
            screen={screen}
            state={state}
            onPick={onPick}
            onOrder={(order) => change({ order })}
          />
        ) : (
          <EmptyState
            title="Nothing matches"
            act={<Button onClick={() => change(everything)}>Show all rasters</Button>}
          >
            No published raster has all of this{state.fitting ? " and fits the screen" : ""}.
          </EmptyState>
        )}
      </div>
      {left === undefined ? null : (
        <FootBar
          status={
            right === undefined ? (
              <>
                <strong>{entryWords(left)}</strong> <span className="text-muted">tick one more to compare it with</span>
              </>
            ) : (
              <>
                <strong>{entryWords(left)}</strong> <span className="text-muted">against</span>{" "}
                <strong>{entryWords(right)}</strong>
              </>
            )
          }
        >
          <Button onClick={() => change({ picked: [] })}>Untick</Button>
          <Button kind="primary" disabled={right === undefined} onClick={() => change({ comparing: true }, "step")}>
            Compare
          </Button>
        </FootBar>
      )}
    </div>
  );
}
