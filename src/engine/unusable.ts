/** The log is there but cannot be used: exit status 3. The message is for the user, cause and remedy included. */
export class UnusableLog extends Error {
  override readonly name = "UnusableLog";
}

export const endsEarly = (name: string): UnusableLog =>
  new UnusableLog(`${name} ends early or is damaged: its compression cannot be read to the end. Fetch the file again.`);

/** What an engine's error says, without its hints, and with a file called by its name in the plan and not by its path. */
export function firstLine(cause: unknown, path: string, name: string): string {
  const message = cause instanceof Error ? (cause.message.split("\n")[0] ?? "") : String(cause);
  return message.replaceAll(path, name);
}
