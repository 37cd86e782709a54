import {
	familyFunctional,
	familyTitle,
	type FamilySpec
} from '../../../nonlocality/scenario/families';
import { canonicalSubject } from './canonical-subject';

/**
 * Family members that are recognised in whatever notation they are entered, and that the search
 * offers to every group. The first of two equivalent ones gives the name (CGLMP d=2 is CHSH).
 */
const RECOGNISED: readonly FamilySpec[] = [
	{ name: 'chsh' },
	{ name: 'i3322' },
	...[3, 4, 5, 6].map((d) => ({ name: 'cglmp', d })),
	...[3, 4, 5, 6, 7].map((n) => ({ name: 'chained', n })),
	{ name: 'elegant' },
	{ name: 'mermin', n: 3 },
	{ name: 'mermin', n: 4 },
	{ name: 'svetlichny', n: 3 },
	{ name: 'gyni', n: 3 },
	{ name: 'magic-square' }
];

let byDigest: Map<string, FamilySpec> | undefined;

/** Built once: about 0.3 s of canonical forms. */
function recognised(): Map<string, FamilySpec> {
	if (!byDigest) {
		byDigest = new Map();
		for (const spec of RECOGNISED) {
			const { digest } = canonicalSubject(familyFunctional(spec));
			if (!byDigest.has(digest)) byDigest.set(digest, spec);
		}
	}
	return byDigest;
}

/** The recognised family member of that digest. */
export function familyOfDigest(digest: string): FamilySpec | null {
	return recognised().get(digest) ?? null;
}

export function recognisedDigests(): readonly string[] {
	return [...recognised().keys()];
}

export function recognisedFamilies(): readonly FamilySpec[] {
	return [...recognised().values()];
}

/** The name in plain text and, where letters need more than that, as LaTeX. */
export function namesOf(spec: FamilySpec): { name: string; nameLatex: string | null } {
	const nameLatex = spec.name === 'i3322' ? 'I_{3322}' : null;
	return { name: familyTitle(spec), nameLatex };
}
