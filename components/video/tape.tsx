import { classNames } from "@/components/ui/class-names";

export type TapeProps = {
  /** The slot's name; null or empty for an empty slot. */
  readonly name: string | null;
  readonly number?: number;
  readonly size?: "normal" | "small";
  readonly className?: string;
};

/** A slot's name on cream tape, straight-cut; an empty slot is a dashed outline. Only slots get tape. */
export function Tape({ name, number, size = "normal", className }: TapeProps) {
  const isEmpty = name === null || name === "";
  return (
    <span
      className={classNames(
        "inline-block max-w-full truncate align-middle font-heading leading-tight",
        size === "small" ? "px-2 pt-[3px] pb-1 text-sm" : "px-3 pt-1.5 pb-[7px] text-[15px]",
        isEmpty ? "border border-dashed border-edge font-[500] text-muted" : "bg-tape font-strong text-tape-ink",
        className,
      )}
    >
      {number === undefined ? null : `${number} `}
      {isEmpty ? "empty" : name}
    </span>
  );
}
