/** Formats of numerical data that programs for reproductions write. */
export type DataFormat = 'npy' | 'mat' | 'hdf5';

export const DATA_NAMES: Readonly<Record<DataFormat, string>> = {
	npy: 'an array of NumPy',
	mat: 'a MAT-file of level 5 or 7.3',
	hdf5: 'an HDF5 file'
};

const NPY = [0x93, ...codes('NUMPY')];
const MAT = codes('MATLAB 5.0 MAT-file');
const MAT_HDF5 = codes('MATLAB 7.3 MAT-file');
const HDF5 = [0x89, ...codes('HDF'), 0x0d, 0x0a, 0x1a, 0x0a];

/** The superblock of HDF5 stands at the start, or behind a block of the writer's own. */
const HDF5_PLACES = [0, 512, 1024, 2048];

/**
 * Whether a file begins as its format says: the NPY format of NumPy's documentation, the header text
 * of a MAT-file (MathWorks, "MAT-File Format"), the signature of the HDF5 file format specification.
 */
export function isDataOf(format: DataFormat, bytes: Uint8Array): boolean {
	switch (format) {
		case 'npy':
			return standsAt(bytes, NPY, 0);
		case 'mat':
			return standsAt(bytes, MAT, 0) || (standsAt(bytes, MAT_HDF5, 0) && isHdf5(bytes));
		case 'hdf5':
			return isHdf5(bytes);
	}
}

const isHdf5 = (bytes: Uint8Array) => HDF5_PLACES.some((place) => standsAt(bytes, HDF5, place));

function standsAt(bytes: Uint8Array, signature: readonly number[], place: number): boolean {
	return signature.every((byte, index) => bytes[place + index] === byte);
}

function codes(text: string): number[] {
	return [...text].map((character) => character.charCodeAt(0));
}
