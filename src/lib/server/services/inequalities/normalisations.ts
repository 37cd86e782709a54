import { correlatorGame } from '../../../ledger/correlator-game';
import { knownNormalisations } from '../../../ledger/normalisations';
import { printRational, type Rational } from '../../../nonlocality/exact/rational';
import { functionalOfTerms } from '../../../nonlocality/scenario/problem-terms';
import type { NormalisationView } from '../../../schemas/views';
import { IDENTITY_TEXT } from './affine';
import type { MapText } from './canonical-subject';
import { familyOfName } from './family-of-name';
import type { InequalityRecord } from './inequality-rows';

export interface NormalisationChoice extends NormalisationView {
	/** value there = scale * value of the representative + shift. */
	readonly map: MapText;
}

/**
 * The forms in which an inequality's values are published, its own first. Only those with a
 * positive scale: a maximum stays a maximum.
 */
export function normalisationChoices(
	row: InequalityRecord,
	localMaximum: Rational | null
): readonly NormalisationChoice[] {
	const family = familyOfName(row.name);
	const own = { key: 'own', label: row.name ? 'As named' : 'As first entered', map: IDENTITY_TEXT };
	const game = correlatorGame(functionalOfTerms(row.outputs, row.terms));
	const others = knownNormalisations({ family, outputs: row.outputs, localMaximum, game });
	return [
		own,
		...others
			.filter(({ scale }) => scale.s > 0n)
			.map(({ name, scale, shift }) => ({
				key: keyOf(name),
				label: name.charAt(0).toUpperCase() + name.slice(1),
				map: { scale: printRational(scale), shift: printRational(shift) }
			}))
	];
}

const keyOf = (name: string) =>
	name
		.toLowerCase()
		.replace(/[^a-z0-9]+/g, '-')
		.replace(/^-|-$/g, '');

/** The asked one, or the representative's own where there is no such key. */
export function chooseNormalisation(
	choices: readonly NormalisationChoice[],
	key: string | undefined
): NormalisationChoice {
	const own = { key: 'own', label: 'As first entered', map: IDENTITY_TEXT };
	return choices.find((choice) => choice.key === key) ?? choices[0] ?? own;
}
