"use client";

import { formatFigure } from "@/components/ui/figures";
import { useWidth } from "@/components/ui/use-width";

export type CircuitDrawingProps = {
  readonly sourceVpp: number | undefined;
  readonly sourceOhm: number | undefined;
  /** The resistor in line; 0 for a plain wire. */
  readonly seriesOhm: number | undefined;
  readonly loadOhm: number | undefined;
  /** What arrives at the screen. */
  readonly resultVpp: number | undefined;
};

const HEIGHT_PX = 236;
const WIRE_Y = 92;
const GROUND_Y = 190;
const BOX = { widthPx: 54, heightPx: 18 } as const;

const ohms = (value: number | undefined) =>
  value === undefined ? "? Ω" : formatFigure(value, "Ω", { decimalsAtMost: value < 100 ? 1 : 0 });
const volts = (value: number | undefined) =>
  value === undefined ? "? V" : formatFigure(value, "V", { decimalsAtMost: 3 });

function circuitWords({ sourceVpp, sourceOhm, seriesOhm, loadOhm, resultVpp }: CircuitDrawingProps): string {
  const series = seriesOhm === 0 ? "a plain wire" : `a series resistor of ${ohms(seriesOhm)}`;
  return `A source of ${volts(sourceVpp)} with ${ohms(sourceOhm)} of its own, ${series} in the sync wire, the screen’s load of ${ohms(loadOhm)} to ground; ${volts(resultVpp)} at the screen`;
}

/** The chain from the sync output to the screen: source and its impedance, the resistor, the load. */
export function CircuitDrawing(props: CircuitDrawingProps) {
  const { sourceVpp, sourceOhm, seriesOhm, loadOhm, resultVpp } = props;
  const [attach, widthPx] = useWidth(620);
  const [impedance, load] = [widthPx * 0.27, widthPx - 44];
  const [sourceToPx, screenFromPx] = [impedance + 40, load - 68];
  const at = { source: 30, impedance, series: (sourceToPx + screenFromPx) / 2, load };
  return (
    <figure ref={attach} className="min-w-0">
      <svg
        role="img"
        aria-label={circuitWords(props)}
        width={widthPx}
        height={HEIGHT_PX}
        className="figure block max-w-full"
      >
        <Frames sourceToPx={sourceToPx} screenFromPx={screenFromPx} widthPx={widthPx} />
        <path
          d={`M${at.source} ${WIRE_Y}H${at.load}V${GROUND_Y}M${at.source} ${WIRE_Y}V${GROUND_Y}H${at.load}`}
          className="fill-none stroke-text"
          strokeWidth={1.5}
        />
        <Ground x={(at.source + at.load) / 2} />
        <Source x={at.source} level={volts(sourceVpp)} />
        <Resistor x={at.impedance} name="its own" value={ohms(sourceOhm)} />
        {seriesOhm === 0 ? (
          <text x={at.series} y={WIRE_Y - 16} textAnchor="middle" className="fill-text">
            no resistor
          </text>
        ) : (
          <Resistor x={at.series} name="in line" value={ohms(seriesOhm)} isWanted />
        )}
        <Load x={at.load} value={ohms(loadOhm)} level={volts(resultVpp)} />
      </svg>
      <figcaption className="text-sm text-muted">
        The resistor sits in the sync wire alone: ground goes straight through.
      </figcaption>
    </figure>
  );
}

/** What belongs to the source and what to the screen. */
function Frames({
  sourceToPx,
  screenFromPx,
  widthPx,
}: {
  readonly sourceToPx: number;
  readonly screenFromPx: number;
  readonly widthPx: number;
}) {
  return (
    <g className="fill-none stroke-edge" strokeDasharray="2 4">
      <rect x={0.5} y={24.5} width={sourceToPx} height={GROUND_Y + 14 - 24} rx={7} />
      <rect x={screenFromPx} y={24.5} width={widthPx - screenFromPx - 0.5} height={GROUND_Y + 14 - 24} rx={7} />
      <g className="fill-muted stroke-transparent">
        <text x={2} y={16}>
          sync output
        </text>
        <text x={widthPx - 2} y={16} textAnchor="end">
          screen
        </text>
      </g>
    </g>
  );
}

function Source({ x, level }: { readonly x: number; readonly level: string }) {
  const y = (WIRE_Y + GROUND_Y) / 2;
  return (
    <g>
      <circle cx={x} cy={y} r={15} className="fill-bg stroke-text" strokeWidth={1.5} />
      <path d={`M${x - 8} ${y - 4}h4v8h8v-8h4`} className="fill-none stroke-signal" strokeWidth={1.5} />
      <text x={x + 22} y={y + 4} className="fill-text">
        {level}
      </text>
      <text x={x + 22} y={y + 20} className="fill-muted">
        open
      </text>
    </g>
  );
}

type ResistorProps = {
  readonly x: number;
  readonly name: string;
  readonly value: string;
  readonly isWanted?: boolean;
};

function Resistor({ x, name, value, isWanted = false }: ResistorProps) {
  return (
    <g>
      <rect
        x={x - BOX.widthPx / 2}
        y={WIRE_Y - BOX.heightPx / 2}
        width={BOX.widthPx}
        height={BOX.heightPx}
        className={isWanted ? "fill-bg stroke-lamp" : "fill-bg stroke-text"}
        strokeWidth={isWanted ? 2.5 : 1.5}
      />
      <text x={x} y={WIRE_Y - 32} textAnchor="middle" className="fill-muted">
        {name}
      </text>
      <text x={x} y={WIRE_Y - 16} textAnchor="middle" className={isWanted ? "fill-lamp" : "fill-text"}>
        {value}
      </text>
    </g>
  );
}

function Load({ x, value, level }: { readonly x: number; readonly value: string; readonly level: string }) {
  const y = (WIRE_Y + GROUND_Y) / 2;
  return (
    <g>
      <rect
        x={x - BOX.heightPx / 2}
        y={y - BOX.widthPx / 2}
        width={BOX.heightPx}
        height={BOX.widthPx}
        className="fill-bg stroke-text"
        strokeWidth={1.5}
      />
      <circle cx={x} cy={WIRE_Y} r={3} className="fill-signal" />
      <text x={x} y={WIRE_Y - 16} textAnchor="middle" className="fill-signal">
        {level}
      </text>
      <text x={x} y={WIRE_Y - 32} textAnchor="middle" className="fill-muted">
        arrives
      </text>
      <text x={x - 16} y={y + 4} textAnchor="end" className="fill-text">
        {value}
      </text>
    </g>
  );
}

function Ground({ x }: { readonly x: number }) {
  return (
    <path
      d={`M${x} ${GROUND_Y}v10M${x - 14} ${GROUND_Y + 10}h28M${x - 9} ${GROUND_Y + 15}h18M${x - 4} ${GROUND_Y + 20}h8`}
      className="fill-none stroke-text"
      strokeWidth={1.5}
    />
  );
}
