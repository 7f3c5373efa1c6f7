import { existsSync } from "node:fs";
import path from "node:path";
import { describe, expect, it } from "vitest";
import { currentItem, navigation, safeReturnPath, signInPath } from "@/components/shell/navigation";

const root = path.resolve(import.meta.dirname, "../../..");

describe("navigation", () => {
  it.each(navigation.map((item) => item.href))("leads to a page that exists: %s", (href) => {
    const candidates = ["(site)", "(account)", "(console)"].map((group) =>
      path.join(root, "app", group, href, "page.tsx"),
    );
    expect(candidates.filter((candidate) => existsSync(candidate))).toHaveLength(1);
  });

  it("marks the page that a deeper address belongs to", () => {
    expect(currentItem("/library/1/apply")?.label).toBe("Library");
    expect(currentItem("/libraryan")).toBeUndefined();
    expect(currentItem("/")).toBeUndefined();
  });
});

describe("return address after signing in", () => {
  it("keeps a path of this site with its query", () => {
    expect(safeReturnPath("/bench?restore=1")).toBe("/bench?restore=1");
    expect(signInPath("/bench?restore=1")).toBe("/sign-in?from=%2Fbench%3Frestore%3D1");
  });

  it.each([
    "//elsewhere.example",
    "/\\elsewhere.example",
    "https://elsewhere.example",
    "javascript:alert(1)",
    "",
    "bench",
    "/a\nb",
    null,
  ])("leads to the Bench instead of %j", (wanted) => expect(safeReturnPath(wanted)).toBe("/bench"));
});
