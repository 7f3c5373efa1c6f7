// @vitest-environment jsdom
import { act, cleanup, render, screen } from "@testing-library/react";
import type { ReactNode } from "react";
import { afterEach, expect, it } from "vitest";
import { LinkStateProvider, useLink, useProvideLink } from "@/components/shell/link-state";
import type { LinkState } from "@/components/shell/link-state";
import { PorchLamp } from "@/components/video/porch-lamp";

afterEach(cleanup);

function Lamp() {
  const link = useLink();
  return <PorchLamp state={link.state} text={link.text} />;
}

function Page({ state, text }: { readonly state: LinkState; readonly text: string }) {
  useProvideLink(state, text);
  return null;
}

it("is dark, and says so, while no page has a device", () => {
  render(
    <LinkStateProvider>
      <Lamp />
    </LinkStateProvider>,
  );
  expect(screen.getByRole("status").textContent).toBe("No device connected");
});

it("follows the page that holds the device, and goes dark when that page leaves", () => {
  const tree = (page: ReactNode) => (
    <LinkStateProvider>
      <Lamp />
      {page}
    </LinkStateProvider>
  );
  const { rerender, container } = render(tree(<Page state="lit" text="Lanternfield LF-8 connected" />));
  expect(screen.getByRole("status").textContent).toBe("Lanternfield LF-8 connected");
  act(() => rerender(tree(<Page state="trouble" text="The cable is out" />)));
  expect(screen.getByRole("status").textContent).toBe("The cable is out");
  expect(container.querySelector("[data-link-state=trouble]")).not.toBeNull();
  act(() => rerender(tree(null)));
  expect(screen.getByRole("status").textContent).toBe("No device connected");
});

// WCAG 2.2, 1.4.1: the four states differ in shape, not in colour alone.
it("draws each state in a shape of its own", () => {
  const shapes = (["dark", "lit", "breathing", "trouble"] as const).map((state) => {
    const { container, unmount } = render(<PorchLamp state={state} text="" />);
    const svg = container.querySelector("svg")?.innerHTML.replace(/class="[^"]*"/gu, "");
    unmount();
    return svg;
  });
  expect(new Set(shapes).size).toBe(4);
});
