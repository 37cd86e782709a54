/** `check-claim CLAIM.json`: recomputes one claim and judges it as the ledger does. */
import { deriveVerdict, type Verdict } from '../lib/ledger/verdict';
import {
	StatedValueError,
	claimedRelation,
	readStatedValue,
	type StatedValue
} from '../lib/ledger/stated-value';
import type { Relation } from '../lib/ledger/claim';
import { parseClaimJson, type ClaimJson } from '../lib/schemas/claim-json';
import { ProblemError, UnsolvedQuantityError, parseProblem } from '../lib/schemas/problem';
import { printableComputation, printableVerdict } from './claim-report';
import { judgeClaim } from './judge-claim';
import { exitCodeOf, readProblem } from './problem-input';
import { consoleControl } from './progress';
import { CommandError, EXIT, printJson, readJson, runCommand } from './read-input';

const USAGE = 'usage: npm run --silent check-claim -- CLAIM.json   (- for standard input)';

const HELP = `Recomputes one claim and judges it as the ledger does.

${USAGE}

CLAIM.json is one object:
  "problem"    the subject and quantity, as \`bound -- --help\` describes them
  "value"      as printed, best as text: "7.3190", "2*sqrt(2)", "82.8 %", "0.25088(2)", "4/3"
  "relation"   "=" (default), "<=" or ">="
  "reading"    "rounded", "truncated" or "exact"; left out, the printed form decides
  "method"     the method the paper used, in its words

It prints "status" (agreement, discrepancy or open), "reason", the interval that the value is read as, the
enclosure it is compared with, "diagnosis" (changes under which the claim would agree) and the result with
its certificate. Exit codes are those of \`bound\`: ${EXIT.done} whenever the claim could be judged, whatever the verdict.

Example:
  echo '{"problem": {"family": {"name": "i3322"}, "quantity": "quantum"}, "value": "0.2509"}' | npm run --silent check-claim -- -
`;

await runCommand(HELP, async () => {
	const written = readClaim(readJson(USAGE));
	const reading = readValue(written);
	const claim = { ...written, relation: readRelation(written, reading) };
	if (isUnsolved(claim)) {
		printJson(printableVerdict(withoutSolver(claim, reading)));
		return EXIT.unfinished;
	}
	const judged = await judgeClaim(claim, reading, readProblem(claim.problem), consoleControl());
	printJson({ ...printableVerdict(judged.verdict), ...printableComputation(judged) });
	return exitCodeOf(judged.result);
});

function readClaim(json: unknown): ClaimJson {
	try {
		return parseClaimJson(json);
	} catch (error) {
		if (error instanceof ProblemError) throw new CommandError(EXIT.malformed, error.message);
		throw error;
	}
}

function readValue({ printed, reading }: ClaimJson): StatedValue {
	try {
		return readStatedValue(printed, reading);
	} catch (error) {
		if (!(error instanceof StatedValueError)) throw error;
		throw new CommandError(
			EXIT.malformed,
			`value (at position ${error.position}): ${error.message}`
		);
	}
}

function readRelation({ relation }: ClaimJson, reading: StatedValue): Relation {
	const claimed = claimedRelation(reading, relation);
	if (claimed) return claimed;
	throw new CommandError(
		EXIT.malformed,
		`value (at position 0): starts with another sign than the relation ${relation}; keep one`
	);
}

/** A quantity no solver serves is a legal claim: it is Open. */
function isUnsolved({ problem }: ClaimJson): boolean {
	try {
		parseProblem(problem);
		return false;
	} catch (error) {
		return error instanceof UnsolvedQuantityError;
	}
}

function withoutSolver({ relation }: ClaimJson, reading: StatedValue): Verdict {
	const recomputation = { kind: 'no-solver' } as const;
	return { ...deriveVerdict({ reading, relation, evidence: [], recomputation }), diagnosis: [] };
}
