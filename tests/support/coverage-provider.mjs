/**
 * Coverage by V8, without the fallbacks that only the type checker asks for: an index into a list may
 * be undefined to it (`noUncheckedIndexedAccess`), so the code says `list[i] ?? 0`, and where i is in
 * range the 0 is no branch that a test could take. What counts as one is narrow: the left side ends
 * in `]`, `]?.length` or `.at(-1)`, the right side is a literal or a name in capitals, and no test
 * took it.
 */
import { readFileSync } from 'node:fs';
import v8 from '@vitest/coverage-v8';

const FALLBACK =
	/^(?:-?\d[\w.]*|'[^'\n]*'|\[(?:(?:-?\d[\w.]*|NaN)(?:, )?)*\]|null|false|[A-Z][A-Z_]*)(?![\w.([])/;

/** Where a place in the text is, given where its lines start. */
const indexOf = (starts, { line, column }) => (starts[line - 1] ?? 0) + column;

function withoutFallbacks(coverage, text) {
	const starts = [0];
	for (let i = text.indexOf('\n'); i >= 0; i = text.indexOf('\n', i + 1)) starts.push(i + 1);
	const isFallback = ({ start }) => {
		const at = indexOf(starts, start);
		return (
			/(?:\](?:\?\.length)?|\.at\(-1\))\s*\?\?\s*$/.test(text.slice(Math.max(0, at - 80), at)) &&
			FALLBACK.test(text.slice(at))
		);
	};
	for (const [id, branch] of Object.entries(coverage.branchMap)) {
		if (branch.type !== 'binary-expr') continue;
		const counts = coverage.b[id];
		const kept = branch.locations.map((place, i) => counts[i] > 0 || !isFallback(place));
		branch.locations = branch.locations.filter((_, i) => kept[i]);
		coverage.b[id] = counts.filter((_, i) => kept[i]);
	}
}

export default {
	...v8,
	async getProvider() {
		const provider = await v8.getProvider();
		const generate = provider.generateCoverage.bind(provider);
		provider.generateCoverage = async (options) => {
			const map = await generate(options);
			for (const file of map.files())
				withoutFallbacks(map.fileCoverageFor(file).data, readFileSync(file, 'utf8'));
			return map;
		};
		return provider;
	}
};
