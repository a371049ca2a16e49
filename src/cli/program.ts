import { Command, CommanderError } from "commander";
import { check } from "./check.ts";
import { compare } from "./compare.ts";
import { demo } from "./demo.ts";
import type { Library } from "./library.ts";
import { DEBUG, MEMORY, type RawOptions, readOptions, THREADS } from "./options.ts";
import { report } from "./report.ts";
import { schema } from "./schema.ts";
import { seal } from "./seal.ts";
import { addSize } from "./size.ts";
import type { ExitStatus, Terminal } from "./terminal.ts";
import { trace } from "./trace.ts";
import { unwritableText } from "./unwritable.ts";
import { type CommandFacts, UsageError, unknownCommand, unknownOption, wrongArguments } from "./usage.ts";
import { verify } from "./verify.ts";

export interface Surroundings {
  readonly terminal: Terminal;
  readonly load: () => Promise<Library>;
  readonly signal: AbortSignal;
  readonly version: string;
}

/** Reads the arguments and runs the command. A mistake in them is status 2; anything unforeseen is thrown. */
export async function run(argv: readonly string[], surroundings: Surroundings): Promise<ExitStatus> {
  let status: ExitStatus = 0;
  const program = commands(surroundings, (given) => {
    status = given;
  });
  try {
    await program.parseAsync(argv, { from: "user" });
    return status;
  } catch (error) {
    // Printed already: the help or the version that was asked for, or the help in place of a missing command.
    if (error instanceof CommanderError && PRINTED.includes(error.code)) return error.exitCode === 0 ? 0 : 2;
    surroundings.terminal.settle();
    surroundings.terminal.complain(mistakeText(error, program, argv));
    return 2;
  }
}
const PRINTED = ["commander.help", "commander.helpDisplayed", "commander.version"];

/** @throws what is no mistake of the user's */
function mistakeText(error: unknown, program: Command, argv: readonly string[]): string {
  const usage = error instanceof CommanderError ? inOurWords(error, program, argv) : error;
  if (usage instanceof UsageError) return usage.message;
  const unwritable = unwritableText(error);
  if (unwritable === null) throw error;
  return unwritable;
}

function commands({ terminal, load, signal, version }: Surroundings, end: (status: ExitStatus) => void): Command {
  const program = new Command("closeout")
    .description(
      "Closes an A/B test: reads its event log and the plan written before it, and writes one decision report.",
    )
    .version(version, "--version", "print the version")
    .helpOption("--help", "print this help")
    .helpCommand("help [COMMAND]", "print the help of a command")
    .exitOverride()
    .configureOutput({
      writeOut: (text) => terminal.print(text.trimEnd()),
      writeErr: (text) => terminal.complain(text.trimEnd()),
      outputError: () => {}, // said in our own words, by run
    })
    .usage("COMMAND …")
    .addHelpText("after", AFTER_HELP);

  program
    .command("report")
    .summary("write the decision report of a test")
    .description(
      "Applies the plan to its log and writes the decision report: report.html, report.json and what goes with them.",
    )
    .argument("PLAN", "the plan, a YAML file; the log's files are named in it")
    .usage("PLAN [options]")
    .option("--out <DIR>", "the report's folder (default: out/ and the experiment's name, in the current folder)")
    .option("--previous <REPORT>", "the report.json to compare with, or none (default: the one in the report's folder)")
    .option(
      "--figures",
      "also write each figure as SVG, page one alone, and decision.csv, a line for a log of decisions",
    )
    .option(
      "--from-cells <FILE>",
      "take the figures of an earlier report's cells.json, to see another confidence or limit",
    )
    .addOption(THREADS)
    .addOption(MEMORY)
    .addOption(DEBUG)
    .action(async (plan: string, options: RawOptions) => {
      const read = readOptions(options, facts(program, "report"));
      end(await report({ plan, options: read }, terminal, await load(), signal));
    });

  program
    .command("verify")
    .summary("prove that a report says what its log says")
    .description(
      "Makes a report anew from the plan inside it and from the log, and compares the two. Says what differs: a file of the log, a number, a sentence.",
    )
    .argument("REPORT", "the report.html, or the folder that it lies in")
    .usage("REPORT [options]")
    .option(
      "--cells",
      "recompute from cells.json beside the report, without the log, and say what that leaves unproven",
    )
    .option("--base <DIR>", "the folder that the plan lay in (default: looked for above the report)")
    .addOption(THREADS)
    .addOption(MEMORY)
    .addOption(DEBUG)
    .action(async (file: string, options: RawOptions) => {
      const { threads, memory } = readOptions(options, facts(program, "verify"));
      end(
        await verify(
          { file, options: { base: options.base, cells: options.cells, threads, memory } },
          terminal,
          await load(),
          signal,
        ),
      );
    });

  program
    .command("compare")
    .summary("say what differs between two reports")
    .description("Compares two reports of one experiment: plan, log, who was counted, estimates, checks, conclusion.")
    .argument("OLD", "a report.json")
    .argument("NEW", "another report.json")
    .usage("OLD NEW [options]")
    .option("--out <FILE>", "write it as a document, an HTML file, instead of to the terminal")
    .addOption(DEBUG)
    .action(async (before: string, after: string, options: RawOptions) => {
      // Anything else would be written over by a page, a report.json too.
      if (options.out !== undefined && !/\.html?$/i.test(options.out))
        throw wrongArguments(`--out ${options.out}: expected the name of an .html file.`, facts(program, "compare"));
      end(await compare({ before, after, out: options.out }, terminal, await load()));
    });

  program
    .command("seal")
    .summary("print the fingerprint of a plan's rule, to keep before the start")
    .description(
      "Prints the fingerprint of what decides: metrics, allocation, enrolment, follow-up and decision. Kept before the start, it proves later that the rule came first.",
    )
    .argument("PLAN", "the plan, a YAML file")
    .usage("PLAN")
    .addOption(DEBUG)
    .action(async (plan: string) => end(await seal(plan, terminal, await load())));

  program
    .command("check")
    .summary("look at plan and log before the end, blind: no result")
    .description(
      "Reads plan and log while a test runs, or before its result is looked at, and writes check.html and check.json: the rule in words, how far the test is, who was counted, and whether the data can be trusted. Nothing by variant that could show an effect.",
    )
    .argument("PLAN", "the plan, a YAML file; the log's files are named in it")
    .usage("PLAN [options]")
    .option("--out <DIR>", "the report's folder (default: out/ and the experiment's name, in the current folder)")
    .addOption(THREADS)
    .addOption(MEMORY)
    .addOption(DEBUG)
    .action(async (plan: string, options: RawOptions) => {
      const read = readOptions(options, facts(program, "check"));
      end(await check({ plan, options: read }, terminal, await load(), signal));
    });

  program
    .command("trace")
    .summary("follow one unit's rows through the ledger, on the terminal")
    .description(
      "Reads plan and log as the report does, and prints what became of one unit and each of its rows, in order of time: the line of the ledger on which each ended, and by which measures it is counted. No file is written, since ids are personal data.",
    )
    .argument("PLAN", "the plan, a YAML file; the log's files are named in it")
    .usage("PLAN --unit ID [options]")
    .requiredOption("--unit <ID>", "the id, as the log has it")
    .addOption(THREADS)
    .addOption(MEMORY)
    .addOption(DEBUG)
    .action(async (plan: string, options: RawOptions & { readonly unit: string }) => {
      const { out: _none, ...read } = readOptions(options, facts(program, "trace"));
      end(await trace({ plan, unit: options.unit, options: read }, terminal, await load(), signal));
    });

  program
    .command("demo")
    .summary("try it: an invented test with its log, plan and report")
    .description(
      "Writes an invented ferry line's plan (with comments that explain it) and log, then the report on them.",
    )
    .argument("[DIR]", "where to write plan.yaml, data/ and report/", "out/demo")
    .usage("[DIR] [options]")
    .addOption(DEBUG)
    .action(async (folder: string) => end(await demo(folder, terminal, await load(), signal)));

  addSize(program, () => facts(program, "size"), terminal, load, end);

  program
    .command("schema")
    .summary("print the JSON Schema of the plan, of report.json or of check.json")
    .description("Prints a JSON Schema. With the plan's, an editor completes and checks a plan while you write it.")
    .argument("[OF]", "plan, report for report.json, or check for check.json", "plan")
    .usage("[plan|report|check]")
    .addOption(DEBUG)
    .action(async (of: string) => {
      if (of !== "plan" && of !== "report" && of !== "check") {
        throw wrongArguments(`There is no schema of "${of}".`, facts(program, "schema"));
      }
      end(schema(of, terminal, await load()));
    });
  return program;
}

const AFTER_HELP = `
Examples:
  closeout demo              an invented test in out/demo, to look around
  closeout check plan.yaml   while the test runs: log and dates, no result
  closeout report plan.yaml  its report in out/ and the experiment's name

Exit status: 0 done, whatever the report concludes; 2 the plan or the arguments
are wrong, or a file, column or unit that they name is not there; 3 the log cannot
be used; 4 verify: the report does not hold; 1 a fault of closeout itself.`;

/** Commander's complaint as ours; null for one that these commands cannot bring about. */
function inOurWords(error: CommanderError, program: Command, argv: readonly string[]): UsageError | null {
  const all = program.commands.map((command) => facts(program, command.name()));
  const first = argv.find((word) => !word.startsWith("-"));
  const command = all.find((one) => one.name === first) ?? null;
  // The word that is wrong stands in quotes in the message; nothing else of it is used.
  const [, word = ""] = /'([^']*)'/.exec(error.message) ?? [];
  switch (error.code) {
    case "commander.unknownCommand":
      return unknownCommand(word, all);
    case "commander.unknownOption":
      return unknownOption(word, command);
    case "commander.optionMissingArgument":
      return new UsageError(`${word.split(" ")[0]} needs a value: ${word.replace(/[<>]/g, "")}`);
    case "commander.missingMandatoryOptionValue":
      return command && wrongArguments(`closeout ${command.name} needs ${word}.`, command);
    case "commander.missingArgument":
      return command && wrongArguments(`closeout ${command.name} needs ${word}.`, command);
    case "commander.excessArguments":
      return command && wrongArguments(`closeout ${command.name} was given too many names.`, command);
    default:
      return null;
  }
}

function facts(program: Command, name: string): CommandFacts {
  const command = program.commands.find((one) => one.name() === name);
  if (command === undefined) throw new Error(`the command ${name} is not there`);
  const options = [...command.options.map((option) => option.long ?? option.flags), "--help"];
  return { name, usage: `${name} ${command.usage()}`, options };
}
