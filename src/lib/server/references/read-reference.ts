import { createHash } from 'node:crypto';
import { pathToFileURL } from 'node:url';
import { Piscina } from 'piscina';
import { findWorkerFile } from '../jobs/worker-file';
import { Recent } from '../recent';
import { BIBTEX_LIMITS, parseBibtex, type BibtexReading } from './parse-bibtex';

/** A form is read again at every pause in typing, mostly with the same paper in it. */
const cache = new Recent<BibtexReading>(200);
const TIME_LIMIT_MS = 20_000;

const TOO_SLOW: BibtexReading = {
	ok: false,
	message: 'This BibTeX takes too long to read.',
	position: null
};

let pool: Piscina | null | undefined;

/** Reads and formats one BibTeX entry in a thread of its own (here, where none is built). */
export async function readReference(bibtex: string): Promise<BibtexReading> {
	// Too long, or empty: no need to hash it or to send it anywhere.
	if (bibtex.length > BIBTEX_LIMITS.characters || !bibtex.trim()) return parseBibtex(bibtex);
	const key = createHash('sha256').update(bibtex).digest('base64');
	const known = cache.get(key);
	if (known) return known;
	const reading = await parse(bibtex);
	// A busy moment is no reason to refuse the same paper later.
	return reading === TOO_SLOW ? reading : cache.keep(key, reading);
}

async function parse(bibtex: string): Promise<BibtexReading> {
	if (pool === undefined) pool = openPool();
	if (!pool) return parseBibtex(bibtex);
	try {
		return await pool.run(bibtex, { signal: AbortSignal.timeout(TIME_LIMIT_MS) });
	} catch (error) {
		if (error instanceof Error && error.name === 'AbortError') {
			return TOO_SLOW;
		}
		throw error;
	}
}

function openPool(): Piscina | null {
	const file = findWorkerFile('references');
	if (!file) return null;
	return new Piscina({
		filename: pathToFileURL(file).href,
		minThreads: 0,
		maxThreads: 1,
		idleTimeout: Infinity
	});
}

/** Starts the thread and its formatting engine in the background. */
export async function warmReferences(): Promise<void> {
	await parse('@misc{a, title = {A}, author = {B, C}, year = {2000}}');
}

export async function closeReferences(): Promise<void> {
	const open = pool;
	pool = undefined;
	await open?.destroy();
}
