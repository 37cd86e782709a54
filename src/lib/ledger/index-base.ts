import type { OtherValue } from './diagnosis';
import { IDENTITY_MAP, valueOfFinding, type Finding } from './evidence';
import { valueLabel } from './problem-labels';

/** The claimed quantity of an expression whose inputs were counted from the other number. */
export function valueWithOtherBase(finding: Finding, base: 0 | 1): OtherValue {
	const label = `counted from ${base}, ${valueLabel(finding.result.problem)}`;
	return { ...valueOfFinding(finding, IDENTITY_MAP), label, matchesMethod: false };
}
