import { FAMILIES } from '../../../nonlocality/scenario/families';

/** A family member as the diagnosis knows it: with its n or d. */
export interface NamedFamily {
	readonly name: string;
	readonly parameter?: number;
}

/** The family member that an inequality's stored name (`CGLMP d=3`) stands for. */
export function familyOfName(name: string | null): NamedFamily | null {
	if (name === null) return null;
	const info = FAMILIES.find(({ title }) => name === title || name.startsWith(`${title} `));
	if (!info) return null;
	const parameter = /[nd]=(\d+)$/.exec(name)?.[1];
	return { name: info.name, ...(parameter ? { parameter: Number(parameter) } : {}) };
}
