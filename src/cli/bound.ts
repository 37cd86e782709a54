/** `bound FILE.json`: recomputes a problem and prints its result with the certificate. */
import { solve } from '../lib/nonlocality';
import { exitCodeOf, readProblem } from './problem-input';
import { consoleControl } from './progress';
import { printJson, readJson, runCommand } from './read-input';

const USAGE = 'usage: npm run --silent bound -- FILE.json   (- for standard input)';

await runCommand(async () => {
	const problem = readProblem(readJson(USAGE));
	const result = await solve(problem, consoleControl());
	printJson(result);
	if (result.status !== 'done') process.stderr.write(`${result.status}: ${result.reason}\n`);
	return exitCodeOf(result);
});
