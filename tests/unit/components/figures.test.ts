import { describe, expect, it } from "vitest";
import * as figures from "@/components/ui/figures";

describe("figures on screen", () => {
  it("groups thousands with a thin space (U+2009), also in four digits", () => {
    expect(figures.formatNumber(1440)).toBe("1\u2009440");
    expect(figures.formatNumber(27_000_000)).toBe("27\u2009000\u2009000");
    expect(figures.formatNumber(999)).toBe("999");
  });

  it("writes a real minus (U+2212), and none before a zero", () => {
    expect(figures.formatNumber(-3)).toBe("\u22123");
    expect(figures.formatNumber(-0.0001)).toBe("0");
    expect(figures.formatNumber(-0.04, { decimals: 1 })).toBe("0.0");
  });

  it("keeps the decimals asked for, or drops trailing zeros", () => {
    expect(figures.formatNumber(96, { decimals: 1 })).toBe("96.0");
    expect(figures.formatNumber(15.5, { decimalsAtMost: 3 })).toBe("15.5");
    expect(figures.formatNumber(100, { decimalsAtMost: 2 })).toBe("100");
  });

  it("joins figure and unit so that no line ends between them", () => {
    expect(figures.formatFigure(97.6, "%", { decimals: 1 })).toBe("97.6\u00A0%");
  });

  // CTA-861 code 8: 27 MHz by 1 716 clocks and 262 lines.
  it("names the rates of 240 lines at 60 Hz", () => {
    expect(figures.formatLineRate(27e6 / 1716)).toBe("15.734\u00A0kHz");
    expect(figures.formatFieldRate(27e6 / 1716 / 262)).toBe("60.05\u00A0Hz");
    expect(figures.formatClock(27e6)).toBe("27.000\u00A0MHz");
  });

  it("shows a figure that is none as a dash", () => {
    expect(figures.formatNumber(Number.NaN)).toBe("–");
    expect(figures.formatNumber(Number.POSITIVE_INFINITY)).toBe("–");
  });

  it("counts down in whole seconds and never below zero", () => {
    expect(figures.formatCountdown(20.2)).toBe("0:21");
    expect(figures.formatCountdown(75)).toBe("1:15");
    expect(figures.formatCountdown(-4)).toBe("0:00");
  });

  it("reads back what it writes, and what people type", () => {
    expect(figures.parseFigure("1\u2009440\u00A0px")).toBe(1440);
    expect(figures.parseFigure("\u22123 lines")).toBe(-3);
    expect(figures.parseFigure("-3")).toBe(-3);
    expect(figures.parseFigure("97,6 %")).toBe(97.6);
    expect(figures.parseFigure(".5")).toBe(0.5);
  });

  it("refuses what is no figure", () => {
    for (const typed of ["", "-", "twelve", "1e9", "1.2.3", "0x10", "NaN"])
      expect(figures.parseFigure(typed)).toBeNull();
  });
});
