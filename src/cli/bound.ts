/** `bound FILE.json`: recomputes a problem and prints its result with the certificate. */
import { SolverStop, sdpaText, solve, type Problem } from '../lib/nonlocality';
import { BOUND_HELP } from './bound-help';
import { exitCodeOf, readProblem } from './problem-input';
import { consoleControl } from './progress';
import { CommandError, EXIT, printJson, readJson, runCommand } from './read-input';

const USAGE =
	'usage: npm run --silent bound -- [--sdpa] FILE.json   (- for standard input; --help says more)';

await runCommand(BOUND_HELP, async () => {
	const args = process.argv.slice(2);
	const [first, ...rest] = args;
	if (first === '--sdpa') return printProgramme(readProblem(readJson(USAGE, rest)));
	const problem = readProblem(readJson(USAGE, args));
	const result = await solve(problem, consoleControl());
	printJson(result);
	if (result.status !== 'done') process.stderr.write(`${result.status}: ${result.reason}\n`);
	return exitCodeOf(result);
});

/** The semidefinite programme instead of its solution. */
function printProgramme(problem: Problem): number {
	if (problem.quantity !== 'npa') {
		const message = `quantity: --sdpa prints the programme of an "npa" problem, not of "${problem.quantity}"`;
		throw new CommandError(EXIT.malformed, message);
	}
	try {
		process.stdout.write(sdpaText(problem));
	} catch (error) {
		if (!(error instanceof SolverStop)) throw error;
		const code = error.status === 'limit' ? EXIT.limit : EXIT.unfinished;
		throw new CommandError(code, `${error.status}: ${error.message}`);
	}
	return EXIT.done;
}
