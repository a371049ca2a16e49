import { createLogUpdate } from "log-update";
import pc from "picocolors";
import type { Progress } from "../index.ts";
import { progressText } from "./progress.ts";

/** Done; a bug of ours; plan or arguments wrong; the log cannot be used; a report does not hold. After a stop by signal: 128 + its number. */
export type ExitStatus = 0 | 1 | 2 | 3 | 4 | 130 | 143;

/** Where words go. Results go to stdout, everything else to stderr. */
export interface Terminal {
  print(text: string): void;
  complain(text: string): void;
  progress(progress: Progress): void;
  /** Takes the progress display away; called before any other word. */
  settle(): void;
  bold(text: string): string;
  dim(text: string): string;
}

type Stream = Pick<NodeJS.WriteStream, "write" | "isTTY" | "columns">;

/** The shortest time between two redrawings, ms. */
const REDRAW = 80;

export function terminalOf(
  stdout: Stream,
  stderr: NodeJS.WriteStream,
  environment: Readonly<Record<string, string | undefined>>,
): Terminal {
  // NO_COLOR counts when it is there and not empty: no-color.org.
  const plain = Boolean(environment.NO_COLOR) || environment.TERM === "dumb";
  const { bold, dim } = pc.createColors(Boolean(stdout.isTTY) && !plain);
  const display = stderr.isTTY && environment.TERM !== "dumb" ? redrawn(stderr) : oneLineAStage(stderr);
  return {
    print: (text) => stdout.write(`${text}\n`),
    complain: (text) => stderr.write(`${text}\n`),
    progress: display.progress,
    settle: display.settle,
    bold,
    dim,
  };
}

/** A terminal: one line, drawn anew. */
function redrawn(stderr: NodeJS.WriteStream): Pick<Terminal, "progress" | "settle"> {
  const draw = createLogUpdate(stderr);
  let stage = "";
  let drawn = 0;
  return {
    progress(progress) {
      const now = Date.now();
      if (progress.stage === stage && now - drawn < REDRAW) return;
      stage = progress.stage;
      drawn = now;
      draw(progressText(progress));
    },
    settle() {
      draw.clear();
      draw.done();
    },
  };
}

/** A pipe or a file: each stage is named once, with no codes that move a cursor. */
function oneLineAStage(stderr: Stream): Pick<Terminal, "progress" | "settle"> {
  let stage = "";
  return {
    progress(progress) {
      if (progress.stage === stage) return;
      stage = progress.stage;
      stderr.write(`${stage}\n`);
    },
    settle() {
      stage = "";
    },
  };
}
