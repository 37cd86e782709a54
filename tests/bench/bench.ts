/**
 * Our semidefinite solver beside general-purpose ones, in one table of CPU times:
 *
 *   npm run bench -- [--all] [--only text] [--seed number] [--rounds number] [--write-baseline]
 *   npm run bench:check
 *
 * `--all` adds what takes minutes (measured once), `--only` keeps the rows with the text in their
 * name, `--seed` repeats the drawn instances of an earlier run. `bench:check` (or `--check`) ends
 * with an error where a ratio to csdp grew by more than 30 % against baseline.json.
 */
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { cpus, loadavg } from 'node:os';
import { parseArgs } from 'node:util';
import { findRegressions, printRegression, unmeasuredRows, type Baseline } from './baseline';
import { fitExponent, measureGrowth } from './growth';
import { drawnInstances, INSTANCES } from './instances';
import { measureInstance, measureStart, RELAXATION_TABLE } from './relaxation-rows';
import { installedSolvers, NativeBench } from './native-solvers';
import { measureOther, OTHER_ROWS } from './other-quantities';
import type { Ratios } from './ratios';
import { printTime } from './table';

const BASELINE = new URL('./baseline.json', import.meta.url);

const { values: options } = parseArgs({
	options: {
		all: { type: 'boolean', default: false },
		check: { type: 'boolean', default: false },
		only: { type: 'string', default: '' },
		rounds: { type: 'string', default: '5' },
		seed: { type: 'string' },
		'write-baseline': { type: 'boolean', default: false }
	}
});
const rounds = Number(options.rounds);
const seed = options.seed === undefined ? Date.now() % 1_000_000 : Number(options.seed);
if (!Number.isInteger(rounds) || rounds < 1 || !Number.isInteger(seed))
	throw new Error('--rounds and --seed are whole numbers, --rounds at least 1');
const wanted = ({ name, long }: { name: string; long?: true }) =>
	name.includes(options.only) && (options.all || !long);

const load = () => loadavg().map((value) => value.toFixed(1));
const solvers = installedSolvers();
console.log(`${cpus()[0]?.model ?? 'unknown processor'}, ${cpus().length} cores`);
console.log(`Node.js ${process.version}, load ${load().join(' ')} at the start`);
console.log(`drawn instances: --seed ${seed}; medians of ${rounds} rounds, long ones once`);
if (!solvers.includes('csdp')) console.log('csdp is not installed (Debian: coinor-csdp)');
if (!solvers.includes('sdpa')) console.log('sdpa is not installed (Debian: sdpa)');

const native = new NativeBench();
const measured: Record<string, Ratios> = {};
try {
	const starts = await measureStart(native, solvers, rounds);
	for (const [name, time] of starts) console.log(`start of ${name}: ${printTime(time)} ms`);
	console.log('\nmilliseconds of CPU; ratios are ours over csdp, with / without its start');
	console.log(RELAXATION_TABLE.head());
	for (const instance of [...INSTANCES, ...drawnInstances(seed)].filter(wanted)) {
		const { line, ratios } = await measureInstance(instance, native, solvers, starts, rounds);
		console.log(line);
		if (!instance.drawn) measured[instance.name] = ratios;
	}
	if (!options.check) await printTheRest();
} finally {
	native.close();
}
console.log(`\nload ${load().join(' ')} at the end`);
if (options['write-baseline']) writeBaseline();
if (options.check) checkBaseline();

async function printTheRest(): Promise<void> {
	const rows = OTHER_ROWS.filter(wanted);
	if (rows.length > 0) console.log('\nother quantities, milliseconds of CPU');
	for (const row of rows) {
		const { milliseconds, outcome } = await measureOther(row);
		console.log(`${row.name.padEnd(52)}${printTime(milliseconds).padStart(9)}  ${outcome}`);
	}
	if (!'growth'.includes(options.only)) return;
	console.log('\ngrowth, plain WASM, random k x k two-outcome functionals at 1+AB');
	const points = await measureGrowth(seed, Math.min(rounds, 3));
	for (const { n, milliseconds } of points) console.log(`n = ${n}: ${printTime(milliseconds)} ms`);
	console.log(`fitted: time proportional to n^${fitExponent(points).toFixed(2)}`);
}

function readBaseline(): Baseline {
	return existsSync(BASELINE) ? JSON.parse(readFileSync(BASELINE, 'utf8')) : {};
}

/** Rows that were not measured keep what they had. */
function writeBaseline(): void {
	const all = { ...readBaseline(), ...measured };
	writeFileSync(BASELINE, `${JSON.stringify(all, null, '\t')}\n`);
	console.log(`${Object.keys(measured).length} rows written to the baseline`);
}

function checkBaseline(): void {
	const baseline = readBaseline();
	if (!solvers.includes('csdp')) throw new Error('there is nothing to compare with: no csdp');
	const long = INSTANCES.filter((instance) => !wanted(instance)).map(({ name }) => name);
	const missing = unmeasuredRows(baseline, measured).filter((row) => !long.includes(row));
	const regressions = findRegressions(baseline, measured);
	for (const row of missing) console.log(`${row}: in the baseline, but no longer measured`);
	for (const regression of regressions) console.log(printRegression(regression));
	if (regressions.length + missing.length > 0) process.exitCode = 1;
	else console.log(`no ratio grew by more than 30 % (${Object.keys(measured).length} rows)`);
}
