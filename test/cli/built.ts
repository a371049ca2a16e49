import { execFileSync, spawn } from "node:child_process";
import { readdirSync, statSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

const ROOT = fileURLToPath(new URL("../..", import.meta.url));
const MAIN = join(ROOT, "dist/cli/main.js");

/** Builds dist/ if a source is newer, so that these tests run what a user runs. */
export function build(): void {
  const sources = readdirSync(join(ROOT, "src"), { recursive: true, encoding: "utf8" });
  const newest = Math.max(...sources.map((file) => statSync(join(ROOT, "src", file)).mtimeMs));
  const built = statSync(MAIN, { throwIfNoEntry: false })?.mtimeMs ?? 0;
  if (built < newest) execFileSync("npm", ["run", "--silent", "build"], { cwd: ROOT, stdio: "inherit" });
}

export interface Ended {
  readonly status: number | null;
  readonly stdout: string;
  readonly stderr: string;
}

export interface Running {
  readonly ended: Promise<Ended>;
  /** Settles when stderr holds the text, or when the command ends. */
  said(text: string): Promise<void>;
  interrupt(): void;
  /** As `head` does when it has seen enough. */
  closeStdout(): void;
}

/** The built command as a child process, its streams piped. */
export function closeout(args: readonly string[], cwd: string, environment: Record<string, string> = {}): Running {
  const child = spawn(process.execPath, [MAIN, ...args], { cwd, env: { ...process.env, ...environment } });
  let [stdout, stderr] = ["", ""];
  child.stdout.on("data", (data) => {
    stdout += data;
  });
  child.stderr.on("data", (data) => {
    stderr += data;
  });
  const ended = new Promise<Ended>((resolve) => {
    child.on("close", (status) => resolve({ status, stdout, stderr }));
  });
  return {
    ended,
    said: (text) =>
      new Promise((resolve) => {
        const look = () => stderr.includes(text) && resolve();
        child.stderr.on("data", look);
        child.on("close", () => resolve());
        look();
      }),
    interrupt: () => child.kill("SIGINT"),
    closeStdout: () => child.stdout.destroy(),
  };
}
