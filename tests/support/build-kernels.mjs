/**
 * Compiles the AssemblyScript kernels and writes them, as base64, where the library reads them:
 * `npm run build:kernels`. The result is committed, so that nothing need be built to run it.
 */
import asc from 'assemblyscript/asc';
import { writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

const FOLDER = 'src/lib/nonlocality/linalg/kernels';
export const GENERATED = `${FOLDER}/wasm-binary.ts`;
const OPTIONS = [
	...['--enable', 'simd', '--disable', 'bulk-memory', '--runtime', 'stub'],
	...['--importMemory', '--noAssert', '-O3', '--converge']
];

/** The text of the generated file. @returns {Promise<string>} */
export async function compileKernels() {
	/** @type {string | Uint8Array} */
	let binary = '';
	const { error, stderr } = await asc.main(
		[`${FOLDER}/assembly/index.ts`, '--outFile', 'kernels.wasm', ...OPTIONS],
		{
			writeFile(_name, contents) {
				binary = contents;
			}
		}
	);
	if (error) throw new Error(`${error.message}\n${stderr.toString()}`);
	const base64 = Buffer.from(binary).toString('base64');
	return (
		'/** Made from assembly/ by `npm run build:kernels`; do not edit. */\n' +
		`export const KERNELS_WASM =\n\t'${base64}';\n`
	);
}

if (process.argv[1] === fileURLToPath(import.meta.url))
	writeFileSync(GENERATED, await compileKernels());
