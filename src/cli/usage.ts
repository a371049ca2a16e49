import { nearest } from "../plan/nearest.ts";
import { list } from "../words/index.ts";

/** What a reader of the command line's own complaints needs to know of a command. */
export interface CommandFacts {
  readonly name: string;
  /** With its placeholder: "report PLAN". */
  readonly usage: string;
  readonly options: readonly string[];
}

/** A mistake in the arguments. Its message is for the user. */
export class UsageError extends Error {}

export function unknownCommand(name: string, commands: readonly CommandFacts[]): UsageError {
  const names = commands.map((command) => command.name);
  const near = nearest(name, names);
  const meant = /\.ya?ml$/i.test(name) ? ` Did you mean closeout report ${name}?` : didYouMean(near);
  return new UsageError(
    `closeout has no command "${name}".${meant}\nThe commands are ${list(names)}; closeout --help describes them.`,
  );
}

export function unknownOption(option: string, command: CommandFacts | null): UsageError {
  const options = command?.options ?? ["--help", "--version"];
  const name = option.replace(/=.*/s, "");
  if (options.includes(name) && name !== option) return new UsageError(`${name} takes no value. Write ${name} alone.`);
  const near = nearest(name, options);
  const whose = command === null ? "closeout" : `closeout ${command.name}`;
  return new UsageError(`${whose} has no option ${name}.${didYouMean(near)}\nIts options are ${list(options)}.`);
}

export function wrongArguments(problem: string, command: CommandFacts): UsageError {
  return new UsageError(`${problem}\nUsage: closeout ${command.usage}`);
}

function didYouMean(near: string | undefined): string {
  return near === undefined ? "" : ` Did you mean ${near}?`;
}
