"use client";

import { useId, useMemo, useRef } from "react";
import type { Ref } from "react";

/** px: the line height of the text, by which the numbers stand beside their lines. */
export const LINE_PX = 20;

export type CodeAreaProps = {
  readonly label: string;
  readonly value: string;
  readonly onChange: (value: string) => void;
  /** The caret moved to a place in the text. */
  readonly onCaret: (offset: number) => void;
  /** Lines with a complaint. */
  readonly badLines: ReadonlySet<number>;
  readonly describedBy: string;
  readonly ref: Ref<HTMLTextAreaElement>;
};

/** A text area for JSON with line numbers. Tab leaves it, as it leaves every field. */
export function CodeArea({ label, value, onChange, onCaret, badLines, describedBy, ref }: CodeAreaProps) {
  const id = useId();
  const gutter = useRef<HTMLDivElement>(null);
  const lineCount = useMemo(() => value.split("\n").length, [value]);
  const numbers = useMemo(() => Array.from({ length: lineCount }, (_, index) => index + 1).join("\n"), [lineCount]);
  return (
    <div className="flex min-h-0 flex-1 border-y border-line bg-sunk">
      <label htmlFor={id} className="sr-only">
        {label}
      </label>
      <div ref={gutter} aria-hidden className="figure relative w-14 shrink-0 select-none overflow-hidden border-r border-line text-right text-muted" style={{ lineHeight: `${LINE_PX}px` }}>
        <pre className="figure px-2 py-2" style={{ lineHeight: `${LINE_PX}px` }}>{numbers}</pre>
        {[...badLines].map((line) => (
          <span key={line} className="absolute left-0 w-1 bg-halt" style={{ top: 8 + (line - 1) * LINE_PX, height: LINE_PX }} />
        ))}
      </div>
      <textarea
        ref={ref}
        id={id}
        value={value}
        spellCheck={false}
        autoCapitalize="off"
        autoComplete="off"
        wrap="off"
        aria-describedby={describedBy}
        aria-invalid={badLines.size > 0 || undefined}
        onChange={(event) => onChange(event.target.value)}
        onSelect={(event) => onCaret(event.currentTarget.selectionStart)}
        onScroll={(event) => {
          if (gutter.current !== null) gutter.current.scrollTop = event.currentTarget.scrollTop;
        }}
        className="figure min-h-[46dvh] flex-1 resize-none overflow-auto bg-sunk px-2.5 py-2 text-text focus-visible:-outline-offset-2 lg:min-h-0"
        style={{ lineHeight: `${LINE_PX}px`, tabSize: 2 }}
      />
    </div>
  );
}

/** Selects a line of a text area and brings it into sight. @param line counted from 1 */
export function showLine(area: HTMLTextAreaElement, line: number): void {
  const lines = area.value.split("\n");
  const start = lines.slice(0, line - 1).reduce((sum, text) => sum + text.length + 1, 0);
  area.focus();
  area.setSelectionRange(start, start + (lines[line - 1]?.length ?? 0));
  area.scrollTop = (line - 1) * LINE_PX - area.clientHeight / 3;
  area.scrollLeft = 0;
}
