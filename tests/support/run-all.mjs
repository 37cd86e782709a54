/**
 * What `npm test` runs: the gates, the build, and every kind of test, one after the other. Prints
 * each runner's own closing lines and at last one line that sums them up.
 */
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { ensureChromium, findChromium } from './chromium.mjs';
import { run } from './run-step.mjs';

/** @typedef {{ passed: number, failed: number, skipped: number }} Counts */

const reports = mkdtempSync(join(tmpdir(), 'merestone-reports-'));
/** @type {Counts} */
const sum = { passed: 0, failed: 0, skipped: 0 };

/** @param {string} file */
function readJson(file) {
	try {
		return JSON.parse(readFileSync(file, 'utf8'));
	} catch {
		return null;
	}
}

/**
 * @param {string} name
 * @param {string[]} projects
 */
function vitest(name, projects) {
	const file = join(reports, `${name}.json`);
	const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${file}`];
	return {
		name,
		command: ['npx', 'vitest', 'run', ...projects.flatMap((p) => ['--project', p]), ...reporters],
		/** @returns {Counts | null} */
		counts() {
			const report = readJson(file);
			if (!report) return null;
			const skipped = report.numPendingTests + report.numTodoTests;
			// A file that does not even load fails without a test of its own.
			const broken = report.testResults.filter(
				(/** @type {any} */ suite) =>
					suite.status === 'failed' && suite.assertionResults.length === 0
			).length;
			return {
				passed: report.numPassedTests,
				failed: report.numFailedTests + broken,
				skipped
			};
		}
	};
}

function playwright() {
	// Where playwright.config.ts puts it.
	const file = 'test-results/e2e.json';
	return {
		name: 'e2e',
		command: ['npx', 'playwright', 'test'],
		before() {
			rmSync(file, { force: true });
			return ensureChromium();
		},
		env: () => ({ CHROMIUM: findChromium() ?? '' }),
		/** @returns {Counts | null} */
		counts() {
			const stats = readJson(file)?.stats;
			if (!stats) return null;
			return {
				passed: stats.expected + stats.flaky,
				failed: stats.unexpected,
				skipped: stats.skipped
			};
		}
	};
}

const all = [
	{ name: 'format', command: ['npm', 'run', '--silent', 'format:check'], gate: true },
	{ name: 'lint', command: ['npm', 'run', '--silent', 'lint'], gate: true },
	{ name: 'types', command: ['npm', 'run', '--silent', 'check'], gate: true },
	vitest('unit', ['unit', 'component']),
	{ name: 'build', command: ['npm', 'run', '--silent', 'build'], gate: true },
	vitest('api', ['api']),
	playwright()
];
// `npm test -- unit api` runs some of them only.
const chosen = process.argv.slice(2);
const steps = all.filter(({ name }) => chosen.length === 0 || chosen.includes(name));

let ok = true;
try {
	for (const step of steps) {
		console.log(`\n── ${step.name}: ${step.command.join(' ')}`);
		const problem = 'before' in step ? step.before() : null;
		if (problem) console.error(problem);
		const code = problem ? 1 : await run(step.command, 'env' in step ? step.env() : {});
		const counts = 'counts' in step ? step.counts() : null;
		if (counts) {
			sum.passed += counts.passed;
			sum.failed += counts.failed;
			sum.skipped += counts.skipped;
		}
		if (code === 0) continue;
		ok = false;
		// A gate is no test, and a runner that failed without a failed test did not run them all.
		if (!counts || counts.failed === 0) sum.failed += 1;
		console.error(`── ${step.name} failed (exit code ${code})`);
		if ('gate' in step) break;
	}
} finally {
	rmSync(reports, { recursive: true, force: true });
}

console.log(`\n${sum.passed} passed, ${sum.failed} failed, ${sum.skipped} skipped`);
process.exitCode = ok ? 0 : 1;
