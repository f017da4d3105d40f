/**
 * What all commands share: options, files, exit codes, messages.
 *
 * Standard output holds only the answer; faults go to standard error, one line each. Exit code 0 done; 1 a defect of
 * ours; 2 bad input, option or file, or a request the model refuses; 3 something was not solved.
 */
import { readFileSync } from "node:fs";
import { resolve } from "node:path";
import { type ParseArgsConfig, parseArgs } from "node:util";
import { type Fault, faultLine, refuse, ScenarioError } from "../scenario/errors.ts";

type Options = NonNullable<ParseArgsConfig["options"]>;

export interface CommandLine {
  /** File names and other arguments without a dash. */
  positionals: string[];
  /** An option's texts in the order given; empty where it was not given. */
  texts: (name: string) => string[];
  flag: (name: string) => boolean;
}

export interface Answer {
  text: string;
  /** False where something was not solved: the answer is printed and the exit code is 3. */
  solved: boolean;
}

export interface Command {
  /** Printed by --help. */
  help: string;
  options: Record<string, "text" | "flag">;
  run: (line: CommandLine) => Answer;
}

/** "--values -1,2" as one argument, or the leading dash of a number would look like an option. */
function joined(given: readonly string[], options: Command["options"]): string[] {
  const result: string[] = [];
  for (let k = 0; k < given.length; k++) {
    const name = given[k].startsWith("--") ? given[k].slice(2) : "";
    if (Object.hasOwn(options, name) && options[name] === "text" && k + 1 < given.length)
      result.push(`${given[k]}=${given[++k]}`);
    else result.push(given[k]);
  }
  return result;
}

function parseLine(given: readonly string[], { options }: Command): CommandLine {
  const config: Options = { help: { type: "boolean" } };
  for (const [name, kind] of Object.entries(options))
    config[name] = kind === "text" ? { type: "string", multiple: true } : { type: "boolean" };
  const { positionals, values, tokens } = parseArgs({
    args: joined(given, options),
    options: config,
    allowPositionals: true,
    strict: false,
    tokens: true,
  });
  const allowed = Object.keys(config)
    .map((name) => `--${name}`)
    .join(", ");
  const faults = tokens.flatMap((token): Fault[] => {
    if (token.kind !== "option") return [];
    if (!Object.hasOwn(config, token.name)) return [{ path: token.rawName, message: "is not an option", allowed }];
    const text = config[token.name].type === "string";
    if (text && token.value === undefined)
      return [{ path: token.rawName, message: "has no value", allowed: "a value after the option" }];
    if (!text && token.value !== undefined)
      return [{ path: token.rawName, message: "takes no value", allowed: token.rawName }];
    return [];
  });
  if (faults.length > 0) throw new ScenarioError(faults);
  return {
    positionals,
    texts: (name) => (Array.isArray(values[name]) ? values[name].filter((text) => typeof text === "string") : []),
    flag: (name) => values[name] === true,
  };
}

/** Content of a file named on the command line, relative to the caller's folder; "-" is standard input. */
export function readText(name: string): string {
  try {
    return readFileSync(name === "-" ? 0 : resolve(process.env.INIT_CWD ?? process.cwd(), name), "utf8");
  } catch (error) {
    const code = error instanceof Error && "code" in error ? String(error.code) : "no reason given";
    return refuse(name, `cannot be read (${code})`, "a file that can be read, or - for standard input");
  }
}

/** A JSON document from a file. */
export function readJson(name: string): unknown {
  const text = readText(name);
  try {
    return JSON.parse(text.replace(/^\uFEFF/, ""));
  } catch (error) {
    return refuse(name, `is not JSON (${error instanceof Error ? error.message : error})`, "a document in JSON");
  }
}

/** The file names, as many as the command takes. */
export function fileNames({ positionals }: CommandLine, names: readonly string[], more = false): string[] {
  if (positionals.length < names.length)
    refuse(names[positionals.length], "is missing", `${names.join(" ")}${more ? " …" : ""}`);
  if (positionals.length > names.length && !more)
    refuse(positionals[names.length], "is one argument too many", names.join(" "));
  return positionals;
}

/** An answer in JSON. */
export const jsonText = (answer: unknown): string => `${JSON.stringify(answer, null, 1)}\n`;

/** Run a command with the arguments of this process and leave its exit code. */
export function runCommand(command: Command): void {
  try {
    const given = process.argv.slice(2);
    if (given.includes("--help")) {
      process.stdout.write(command.help);
      return;
    }
    const { text, solved } = command.run(parseLine(given, command));
    process.stdout.write(text);
    process.exitCode = solved ? 0 : 3;
  } catch (error) {
    if (error instanceof ScenarioError) {
      process.stderr.write(`${error.faults.map(faultLine).join("\n")}\n`);
      process.exitCode = 2;
    } else {
      process.stderr.write(`defect: ${error instanceof Error ? error.stack : error}\n`);
      process.exitCode = 1;
    }
  }
}
