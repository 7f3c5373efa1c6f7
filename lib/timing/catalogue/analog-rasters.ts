import type { CatalogueEntry } from "@/lib/timing/catalogue/catalogue-entry";
import type { AxisTiming } from "@/lib/timing/raster";

const document = "ITU-R BT.601 and BT.470";
const pixelClockHz = 13_500_000;

function axis(active: number, frontPorch: number, sync: number, backPorch: number): AxisTiming {
  return { active, frontPorch, sync, backPorch, polarity: "negative" };
}

/**
 * The two television systems as BT.601 samples them: 720 px at 13.5 MHz, 858 and 864 clocks a line.
 *
 * Across: the picture ends 16 and 12 clocks before the sync (BT.601); the sync is BT.470's 4.7 µs, 63.45 clocks, cut
 * to 63. Down: BT.470's field blanking of 19 and 25 lines with the equalising pulses as front porch. The 2.5 lines of
 * 625/50 cannot be whole lines: 2 before the sync and 3 of it.
 */
export const analogRasters: readonly CatalogueEntry[] = [
  {
    id: "bt601-525",
    name: "525/60, 720 px",
    document,
    aspect: "4:3",
    note: "19 lines of field blanking, the shortest that BT.470 allows",
    timing: { pixelClockHz, interlaced: true, horizontal: axis(720, 16, 63, 59), vertical: axis(243, 3, 3, 13) },
  },
  {
    id: "bt601-625",
    name: "625/50, 720 px",
    document,
    aspect: "4:3",
    note: "the half lines at the edges of the picture are left out",
    timing: { pixelClockHz, interlaced: true, horizontal: axis(720, 12, 63, 69), vertical: axis(287, 2, 3, 20) },
  },
];
