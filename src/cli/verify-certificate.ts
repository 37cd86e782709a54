/** `verify-certificate RESULT.json`: checks a result's certificate without solving again. */
import { verifyResult, type CheckOutcome, type Result } from '../lib/nonlocality';
import { parseProblem } from '../lib/schemas/problem';
import { EXIT, messageOf, printJson, readJson, runCommand } from './read-input';

const USAGE = 'usage: npm run --silent verify-certificate -- RESULT.json   (- for standard input)';

const HELP = `Checks the certificate of a result that \`bound\` printed, without solving again: each printed side that is
called guaranteed must follow from the problem and the certificate alone.

${USAGE}

It prints {"checked": true, "quantity", "lower", "upper", "exact", "method"} with what the certificate proves
and how (exit ${EXIT.done}), or {"checked": false, "reason"} (exit ${EXIT.unchecked}). What each kind holds and how it proves its bound is
described in src/lib/nonlocality/README.md.
`;

await runCommand(HELP, async () => {
	const json = readJson(USAGE);
	const outcome = check(json);
	printJson(outcome.checked ? { ...outcome, quantity: quantityOf(json) } : outcome);
	if (outcome.checked) return EXIT.done;
	process.stderr.write(`not checked: ${outcome.reason}\n`);
	return EXIT.unchecked;
});

/** Whatever the file holds: a result that is no result has not been checked either. */
function check(json: unknown): CheckOutcome {
	const refuse = (reason: string): CheckOutcome => ({ checked: false, reason });
	if (typeof json !== 'object' || json === null || !('problem' in json) || !('status' in json))
		return refuse('this is not a result: it has no status and no problem');
	if (json.status !== 'done')
		return refuse(`the result is ${String(json.status).slice(0, 40)}, not done`);
	try {
		const problem = parseProblem(json.problem);
		// The check reads every field of the certificate for what it is, and trusts none.
		return verifyResult({ ...json, problem } as unknown as Result);
	} catch (error) {
		return refuse(`the result is malformed: ${messageOf(error)}`);
	}
}

function quantityOf(json: unknown): unknown {
	return typeof json === 'object' && json !== null && 'quantity' in json ? json.quantity : null;
}
