import type { DataFormat } from './data-signatures';

/**
 * What may be handed in as evidence: papers, pictures, archives, and the text that programs and
 * their output are. Nothing that a browser would run as a page.
 */
const SNIFFED: Readonly<Record<string, string>> = {
	pdf: 'application/pdf',
	png: 'image/png',
	jpg: 'image/jpeg',
	jpeg: 'image/jpeg',
	gz: 'application/gzip',
	zip: 'application/zip',
	/** NumPy's archive of arrays is a zip. */
	npz: 'application/zip',
	xz: 'application/x-xz',
	bz2: 'application/x-bzip2'
};

/** Data of numerical programs, recognised by `data-signatures.ts`. */
const DATA: Readonly<Record<string, DataFormat>> = {
	npy: 'npy',
	mat: 'mat',
	h5: 'hdf5',
	hdf5: 'hdf5'
};

const TEXT = [
	...['txt', 'md', 'log', 'csv', 'tsv', 'json', 'yaml', 'yml', 'toml', 'tex', 'bib', 'dat-s'],
	...['py', 'jl', 'm', 'c', 'cpp', 'h', 'rs', 'f90', 'ipynb', 'sage', 'mpl', 'nb', 'r']
];

/** Text is never sent as what its ending says: a browser would run some of it. */
const TEXT_TYPE = 'text/plain; charset=utf-8';
const BYTES = 'application/octet-stream';

export type FileKind =
	| { readonly kind: 'text'; readonly mediaType: typeof TEXT_TYPE }
	/** The media type that the content has to be recognised as. */
	| { readonly kind: 'binary'; readonly mediaType: string }
	| { readonly kind: 'data'; readonly format: DataFormat; readonly mediaType: typeof BYTES };

/** By the part of a name after its last dot; null: not taken. */
export function kindOfName(name: string): FileKind | null {
	const extension = extensionOf(name);
	const mediaType = Object.hasOwn(SNIFFED, extension) ? SNIFFED[extension] : undefined;
	if (mediaType) return { kind: 'binary', mediaType };
	const format = Object.hasOwn(DATA, extension) ? DATA[extension] : undefined;
	if (format) return { kind: 'data', format, mediaType: BYTES };
	return TEXT.includes(extension) ? { kind: 'text', mediaType: TEXT_TYPE } : null;
}

export function extensionOf(name: string): string {
	const dot = name.lastIndexOf('.');
	return dot < 1 ? '' : name.slice(dot + 1).toLowerCase();
}

/** `.pdf, .png, ...`: for errors and for a form's `accept`. */
export const ACCEPTED_NAMES: string = [...Object.keys(SNIFFED), ...Object.keys(DATA), ...TEXT]
	.map((extension) => `.${extension}`)
	.join(', ');

/**
 * As what a stored file is sent. A browser shows text and pictures without running anything; what a
 * plug-in or another program would open goes as bytes.
 */
export function servedType(mediaType: string): string {
	const harmless = [TEXT_TYPE, 'image/png', 'image/jpeg'];
	return harmless.includes(mediaType) ? mediaType : BYTES;
}
