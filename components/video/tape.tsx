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
      data-tape-name
      className={classNames(
        "inline-block max-w-full align-middle break-words font-heading leading-tight",
        size === "small" ? "px-2 pb-1 pt-[3px] text-sm" : "px-3 pb-[7px] pt-1.5 text-[15px]",
        isEmpty ? "border border-dashed border-edge font-[500] text-muted" : "bg-tape font-strong text-tape-ink",
        className,
      )}
    >
      {number === undefined ? null : `${number} `}
      {isEmpty ? "empty" : name}
    </span>
  );
}
