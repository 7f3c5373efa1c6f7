// @vitest-environment jsdom
import { cleanup, fireEvent, render, screen } from "@testing-library/react";
import { afterEach, describe, expect, it } from "vitest";
import { RangeRuler } from "@/components/video/range-ruler";

afterEach(cleanup);

const range = { min: -64, max: 63, step: 1 };

function open(props: Partial<Parameters<typeof RangeRuler>[0]> = {}) {
  const changes: number[] = [];
  render(
    <RangeRuler
      label="Horizontal position"
      unit="px"
      range={range}
      safe={[-20, 14]}
      now={12}
      onChange={(value) => changes.push(value)}
      {...props}
    />,
  );
  return changes;
}

describe("range ruler", () => {
  // Source: ARIA Authoring Practices Guide, slider pattern.
  it("is a slider with its range, its value and the unit in words", () => {
    open();
    const slider = screen.getByRole("slider", { name: "Horizontal position" });
    expect(slider.getAttribute("aria-valuemin")).toBe("-64");
    expect(slider.getAttribute("aria-valuemax")).toBe("63");
    expect(slider.getAttribute("aria-valuenow")).toBe("12");
    expect(slider.getAttribute("aria-valuetext")).toBe("12\u00A0px");
  });

  it("moves by keys from the planned value, not from the one on the device", () => {
    const changes = open({ planned: 20 });
    fireEvent.keyDown(screen.getByRole("slider"), { key: "ArrowRight" });
    fireEvent.keyDown(screen.getByRole("slider"), { key: "ArrowLeft", shiftKey: true });
    fireEvent.keyDown(screen.getByRole("slider"), { key: "Home" });
    expect(changes).toEqual([21, 10, -64]);
  });

  it("takes what is typed on Enter, on the device's own steps and within its range", () => {
    const changes = open();
    const input = screen.getByRole("textbox", { name: "Horizontal position, px" });
    fireEvent.change(input, { target: { value: "\u22123.4" } });
    fireEvent.keyDown(input, { key: "Enter" });
    fireEvent.change(input, { target: { value: "900" } });
    fireEvent.blur(input);
    expect(changes).toEqual([-3, 63]);
  });

  it("does not take what is no figure, and gives up on Esc", () => {
    const changes = open();
    const input = screen.getByRole("textbox");
    fireEvent.change(input, { target: { value: "left" } });
    expect(input.getAttribute("aria-invalid")).toBe("true");
    fireEvent.keyDown(input, { key: "Enter" });
    fireEvent.change(input, { target: { value: "5" } });
    fireEvent.keyDown(input, { key: "Escape" });
    fireEvent.blur(input);
    expect(changes).toEqual([]);
  });

  it("changes nothing while it is disabled", () => {
    const changes = open({ disabled: true });
    const slider = screen.getByRole("slider");
    fireEvent.keyDown(slider, { key: "ArrowRight" });
    expect(changes).toEqual([]);
    expect(slider.getAttribute("aria-disabled")).toBe("true");
    expect(slider.tabIndex).toBe(-1);
  });

  it("says in words how the value lies to the safe stretch", () => {
    open();
    expect(screen.getByText("safe on this screen")).toBeDefined();
    cleanup();
    open({ planned: 40 });
    expect(screen.getByText("outside what is safe on this screen")).toBeDefined();
    cleanup();
    open({ safe: null });
    expect(screen.getByText("nothing here is safe on this screen")).toBeDefined();
  });

  it("is a plain figure where nothing can be changed", () => {
    open({ onChange: undefined });
    expect(screen.queryByRole("slider")).toBeNull();
    expect(screen.queryByRole("textbox")).toBeNull();
    expect(screen.getByText("12 px")).toBeDefined();
  });
});
