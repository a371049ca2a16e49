/** The log is there but cannot be used: exit status 3. The message is for the user, cause and remedy included. */
export class UnusableLog extends Error {
  override readonly name = "UnusableLog";
}

/** What an engine's error says, without its hints. */
export const firstLine = (cause: unknown): string =>
  cause instanceof Error ? (cause.message.split("\n")[0] ?? "") : String(cause);
