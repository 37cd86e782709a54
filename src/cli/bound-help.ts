import type { QuantityOfProblem } from '../lib/nonlocality';
import { FAMILIES } from '../lib/nonlocality/notation';
import { PROBLEM_DEFAULTS, PROBLEM_LIMITS } from '../lib/schemas/problem';
import { EXIT } from './read-input';

/** What each quantity is, and the fields it takes beside those that all have. */
const QUANTITY_LINES: Readonly<Record<QuantityOfProblem, readonly string[]>> = {
	value: ['the functional on a given box or strategy', '"box": see below'],
	local: ['maximum over local (deterministic) strategies, exact'],
	'no-signalling': ['maximum over all no-signalling boxes, exact'],
	npa: [
		'bound of a moment-matrix relaxation; its upper side bounds the quantum maximum',
		'"level": 1, 2, 3 ..., "1+AB" (two parties), {"perParty": k} or {"products": ["A", "B", "AB"]}',
		'"nonNegative": true imposes P >= 0 (default false)'
	],
	'see-saw': [
		'the best explicit quantum strategy found in a local dimension: a lower side',
		'"dimension": 2, or one for each party: [2, 3]',
		`"starts": random starts (default ${PROBLEM_DEFAULTS.starts}); "state": "maximally-entangled", or a vector of [re, im]`,
		`"grow": the largest local dimension to grow to (at most ${PROBLEM_LIMITS.grow}); "start": a stored strategy to begin at`
	],
	quantum: [
		'quantum maximum, enclosed from both sides',
		'"levels", "dimensions": lists tried in order (default: escalating)',
		`"gap": stop when upper - lower is at most this (default ${PROBLEM_DEFAULTS.gap})`,
		'"within": [low, high]: stop when both sides lie in it; "start": a stored strategy to begin at'
	],
	hybrid: [
		'maximum over models that are local across some bipartition of three parties or more, exact',
		'"model" (required): "svetlichny" (anything within a group) or "no-signalling"'
	],
	facet: ['whether the inequality is a facet of the local polytope, exact (value 1 or 0)']
};

const quantities = Object.entries(QUANTITY_LINES)
	.map(([name, lines]) =>
		lines.map((line, i) => `  ${(i ? '' : name).padEnd(16)}${line}`).join('\n')
	)
	.join('\n');

/** Names with their parameter, a few to a line. */
const NAMES_A_LINE = 6;
const names = FAMILIES.map(({ name, parameter }) =>
	parameter ? `${name} (${parameter.key})` : name
);
const families = names
	.map((name, i) => `${i > 0 && i % NAMES_A_LINE === 0 ? `\n${' '.repeat(20)}` : ''}${name}`)
	.join(', ')
	.replaceAll(', \n', ',\n');

/** Everything one needs to write a problem, on one page of a terminal. */
export const BOUND_HELP = `Recomputes a bound on the correlations of a Bell scenario, and prints it with its certificate.

usage: npm run --silent bound -- FILE.json          solve the problem in FILE.json
       npm run --silent bound -- -                  the same from standard input
       npm run --silent bound -- --sdpa FILE.json   print the semidefinite programme of an "npa"
                                                    problem (SDPA sparse format) instead of solving
       npm run --silent bound -- --help             this page

The result is JSON on standard output; progress goes to standard error.

A problem is one JSON object with a subject and a quantity.

Subject, one of:
  "expression"      "A0 B0 + A0 B1 + A1 B0 - A1 B1", "<A_0 B_1>", "P(0,1|1,0)", or pasted LaTeX;
                    parties are A to F, outputs count from 0, inputs from "indexBase" (0 or 1, default 0)
  "family"          {"name": "cglmp", "d": 3}; names and parameters:
                    ${families}
  "collinsGisin"    table of two parties: first row and column the marginals, the corner the constant
  "correlators"     the same for observables with two outcomes
  "probabilities"   {"a,b|x,y": coefficient, ...}
  "terms"           [[coefficient, [[party, input, output], ...]], ...], [] for the constant
  "outputs"         [[outputs of each input] for each party]: 1 to ${PROBLEM_LIMITS.parties} parties, any numbers; left out,
                    the smallest scenario that holds what is written
A coefficient is a number or a text: "1/2", "0.25", "sqrt(2)", "2*cos(pi/8)". Texts and decimals are exact.

"quantity", with its own fields:
${quantities}

"box" (for "value", beside a functional): {"a,b|x,y": probability, ...}, or {"family": "isotropic", "d": 2,
"E": "sqrt(1/2)"}, {"family": "uniform"}, {"family": "deterministic", "strategy": [[output for each input]
for each party]}, {"family": "quantum", "state": [[re, im], ...], "measurements": [party][input][output] as
matrices of [re, im]}.

For all: "sense": "max" (default) or "min"; "constraints" (local, no-signalling, npa, see-saw; give
"outputs" where they name more inputs): [{"terms" or "expression", "relation": "=", "<=" or ">=", "value"}]; "seconds": budget (default ${PROBLEM_DEFAULTS.seconds}, at most ${PROBLEM_LIMITS.seconds.toLocaleString('en')}); "seed" (default ${PROBLEM_DEFAULTS.seed}).

In the result, "lower" and "upper" enclose the quantity; "guaranteed" says which of the two are proved,
"exact" is a fraction where the value is known exactly, "certificate" is what proves it. Check it again,
without solving, by: npm run --silent verify-certificate -- RESULT.json

Exit codes: ${EXIT.done} done; ${EXIT.malformed} the problem is malformed (the message names the field); ${EXIT.limit} past a limit (the message
says which, with the figure); ${EXIT.unfinished} a solver could not finish, with the reason.

Examples:
  echo '{"family": {"name": "chsh"}, "quantity": "npa", "level": 1}' | npm run --silent bound -- -
  echo '{"expression": "A0 B0 + A0 B1 + A1 B0 - A1 B1", "quantity": "local"}' | npm run --silent bound -- -
  echo '{"family": {"name": "i3322"}, "quantity": "quantum", "seconds": 60}' | npm run --silent bound -- -
  echo '{"family": {"name": "i3322"}, "quantity": "npa", "level": 2}' | npm run --silent bound -- --sdpa - > i3322.dat-s
`;
