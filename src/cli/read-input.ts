import { readFileSync } from 'node:fs';

/** Exit codes of the command line, as the problem format names them. */
export const EXIT = { done: 0, unchecked: 1, malformed: 2, limit: 3, unfinished: 4 } as const;

/** Ends a command: the message goes to standard error. */
export class CommandError extends Error {
	constructor(
		readonly exitCode: number,
		message: string
	) {
		super(message);
		this.name = 'CommandError';
	}
}

/** A certificate of the largest relaxation we solve is a few megabytes. */
const LARGEST_INPUT = 64 * 1024 * 1024;

/**
 * The JSON in the one file a command is given, `-` for standard input.
 * @throws CommandError when there is none, or it is not JSON.
 */
export function readJson(usage: string, args: readonly string[] = process.argv.slice(2)): unknown {
	const [file, second] = args;
	if (!file || second) throw new CommandError(EXIT.malformed, usage);
	const name = file === '-' ? 'standard input' : file;
	let text: string;
	try {
		text = readFileSync(file === '-' ? 0 : file, 'utf8');
	} catch (error) {
		throw new CommandError(EXIT.malformed, `${name} can't be read: ${messageOf(error)}`);
	}
	if (text.length > LARGEST_INPUT)
		throw new CommandError(EXIT.limit, `${name} is larger than ${LARGEST_INPUT / 1024 / 1024} MB`);
	try {
		return JSON.parse(text);
	} catch (error) {
		throw new CommandError(EXIT.malformed, `${name} is not JSON: ${messageOf(error)}`);
	}
}

export function messageOf(error: unknown): string {
	return error instanceof Error ? error.message : String(error);
}

/** Prints the one JSON document of a command on standard output, a line per field. */
export function printJson(value: object): void {
	const lines = Object.entries(value)
		.filter(([, field]) => field !== undefined)
		.map(([key, field]) => `  ${JSON.stringify(key)}: ${JSON.stringify(field)}`);
	process.stdout.write(`{\n${lines.join(',\n')}\n}\n`);
}

/**
 * Runs a command to its exit code; what goes wrong is one line on standard error.
 * @param help printed instead, on standard output, where it is asked for
 */
export async function runCommand(help: string, command: () => Promise<number>): Promise<void> {
	if (process.argv.slice(2).some((argument) => argument === '--help' || argument === '-h')) {
		process.stdout.write(help);
		return;
	}
	try {
		process.exitCode = await command();
	} catch (error) {
		if (!(error instanceof CommandError)) throw error;
		process.stderr.write(`${error.message}\n`);
		process.exitCode = error.exitCode;
	}
}
