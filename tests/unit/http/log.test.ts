import { describe, expect, it } from "vitest";
import { createLog } from "@/lib/server/log";

function linesOf(write: (log: ReturnType<typeof createLog>) => void): Record<string, unknown>[] {
  const lines: string[] = [];
  write(createLog({ write: (line: string) => lines.push(line) }));
  return lines.map((line) => JSON.parse(line) as Record<string, unknown>);
}

describe("the log", () => {
  it("is one JSON object a line, with the request's id and a time", () => {
    const [line] = linesOf((log) => log.info({ requestId: "r1", status: 200 }));
    expect(line).toMatchObject({ requestId: "r1", status: 200 });
    expect(Date.parse(String(line?.time))).not.toBeNaN();
  });

  it("removes what is secret by its name, at the top and one level down", () => {
    const lines = linesOf((log) => {
      log.info({ password: "p1", cookie: "c1", token: "t1" });
      log.info({ user: { passwordHash: "p1", secret: "s1" }, headers: { authorization: "a1", cookie: "c1" } });
    });
    expect(JSON.stringify(lines)).not.toMatch(/"(p1|c1|t1|s1|a1)"/);
  });
});
