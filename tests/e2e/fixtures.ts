import AxeBuilder from "@axe-core/playwright";
import { expect, test as base } from "@playwright/test";
import type { Page } from "@playwright/test";

/** What a page did wrong by itself, whatever the test looked at. */
type PageFaults = { readonly policy: string[]; readonly errors: string[] };

type Fixtures = {
  /** Fails the test when a page broke the content security policy or threw. */
  readonly pageFaults: PageFaults;
  /** Fails unless axe finds nothing on the page as it stands. */
  readonly expectAccessible: (page: Page) => Promise<void>;
};

/** An address for each test, so that each has the limits of a caller of its own. */
function addressOf(testId: string): string {
  const [a = 0, b = 0, c = 0] = [0, 2, 4].map((at) =>
    parseInt(
      testId
        .slice(-6)
        .padStart(6, "0")
        .slice(at, at + 2),
      16,
    ),
  );
  return `10.${a}.${b}.${c}`;
}

export const test = base.extend<Fixtures>({
  extraHTTPHeaders: async ({}, provide, info) => provide({ "x-forwarded-for": addressOf(info.testId) }),
  pageFaults: [
    async ({ context }, provide) => {
      const faults: PageFaults = { policy: [], errors: [] };
      context.on("console", (message) => {
        if (/content security policy|permissions[- ]policy/i.test(message.text())) faults.policy.push(message.text());
      });
      context.on("weberror", (error) => faults.errors.push(String(error.error().stack ?? error.error())));
      await provide(faults);
      expect(faults, "content security policy violations and uncaught errors").toEqual({ policy: [], errors: [] });
    },
    { auto: true },
  ],
  expectAccessible: async ({}, provide) => {
    await provide(async (page) => {
      // No page has a frame of another, so the findings need no page of their own to be put together in; and what passed
      // needs no description. Either takes as long as the checks do.
      const { violations } = await new AxeBuilder({ page }).setLegacyMode(true).options({ resultTypes: ["violations"] }).analyze();
      const found = violations.map(({ id, help, nodes }) => ({
        id,
        help,
        at: nodes.map((node) => node.target.join(" ")),
      }));
      expect(found, "axe violations").toEqual([]);
    });
  },
});

export { expect };
