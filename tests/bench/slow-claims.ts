/**
 * The published values that take too long for every run of the tests, judged with a minute each:
 * `npx tsx tests/bench/slow-claims.ts [ids]`. Prints what came out beside what is expected.
 */
import { SLOW_CLAIMS, publishedValues, verdictOf } from '../vectors/published-values';

const SECONDS = 60;

const ids = process.argv.slice(2);
let unexpected = 0;
for (const { id, claim, expect } of publishedValues) {
	if (!Object.hasOwn(SLOW_CLAIMS, id) || (ids.length > 0 && !ids.includes(id))) continue;
	const start = performance.now();
	const { status, enclosure, reason, diagnosis } = await verdictOf(claim, SECONDS);
	const seconds = ((performance.now() - start) / 1000).toFixed(1);
	if (status !== expect) unexpected++;
	console.log(`${id}: ${status}, expected ${expect} (${seconds} s)`);
	console.log(
		`  claimed ${claim.value}, found ${enclosure?.lower ?? '?'} to ${enclosure?.upper ?? '?'}`
	);
	console.log(`  ${reason}`);
	for (const { kind, text } of diagnosis) console.log(`  ${kind}: ${text}`);
}
process.exitCode = unexpected > 0 ? 1 : 0;
