import { stripVTControlCharacters } from "node:util";
import { describe, expect, it } from "vitest";
import { faultText } from "../../src/cli/fault.ts";
import { terminalOf } from "../../src/cli/terminal.ts";

/** Streams that remember, with or without a person before them. */
function streams(isTTY: boolean, environment: Record<string, string> = {}) {
  const written = { stdout: "", stderr: "" };
  const stream = (name: "stdout" | "stderr") =>
    ({
      isTTY,
      columns: 80,
      rows: 24,
      write(text: string) {
        written[name] += text;
        return true;
      },
    }) as unknown as NodeJS.WriteStream;
  return { terminal: terminalOf(stream("stdout"), stream("stderr"), environment), written };
}

describe("before a person", () => {
  it("draws the progress anew on stderr, takes it away in the end, and leaves stdout to the result", () => {
    const { terminal, written } = streams(true);
    terminal.progress({ stage: "reading", rows: 1000, share: 0.25 });
    terminal.settle();
    expect(written.stderr).toContain("reading  1,000 rows  25%");
    // The last codes erase the line that was drawn.
    expect(written.stderr.lastIndexOf("\x1b[2K")).toBeGreaterThan(written.stderr.indexOf("25%"));
    expect(written.stdout).toBe("");
  });

  it("sets accents, but none under NO_COLOR or in a dumb terminal; an empty NO_COLOR does not count", () => {
    expect(streams(true).terminal.bold("x")).toBe("\x1b[1mx\x1b[22m");
    expect(streams(true, { NO_COLOR: "" }).terminal.bold("x")).not.toBe("x");
    expect(streams(true, { NO_COLOR: "1" }).terminal.bold("x")).toBe("x");
    expect(streams(true, { TERM: "dumb" }).terminal.dim("x")).toBe("x");
  });
});

describe("into a pipe", () => {
  it("names each stage once, in plain lines without any code", () => {
    const { terminal, written } = streams(false);
    for (const share of [0, 0.1, 0.2]) terminal.progress({ stage: "reading", rows: 10, share });
    terminal.progress({ stage: "counting", rows: 10, share: 0.5 });
    terminal.settle();
    terminal.complain("a.yaml has 1 mistake.");
    expect(written.stderr).toBe("reading\ncounting\na.yaml has 1 mistake.\n");
    terminal.print(terminal.bold("Adopt it."));
    expect(written.stdout).toBe("Adopt it.\n");
    expect(stripVTControlCharacters(written.stderr)).toBe(written.stderr);
  });
});

describe("a fault of ours", () => {
  const fault = new Error("no report", { cause: new Error("units line up to 1 but 2 were enrolled") });

  it("says what happened and what caused it, without a stack", () => {
    expect(faultText(fault, false)).toMatch(/no report\n {2}because: units line up to 1 but 2 were enrolled\n/);
    expect(faultText(fault, false)).not.toContain("    at ");
  });

  it("shows where, of each cause, when asked for", () => {
    expect(faultText(fault, true)).toMatch(/Error: no report\n {4}at [\s\S]*caused by Error: units line up/);
  });

  it("says something even of what is no error", () => {
    expect(faultText("odd", false)).toContain("odd");
    expect(faultText("odd", true)).toContain("odd");
  });
});
