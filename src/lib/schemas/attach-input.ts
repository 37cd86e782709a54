import { z } from 'zod';
import { TASK_LIMITS } from './task-input';

const line = z.string().trim().max(TASK_LIMITS.line, `At most ${TASK_LIMITS.line} characters`);

/** A strategy or certificate that a member attaches to a claim. */
export const attachInput = z.object({
	/** A result of the problem format with its certificate, as JSON. */
	certificate: z.string().default(''),
	source: line.default('')
});

export type AttachInput = z.infer<typeof attachInput>;

/** One that is attached, as its claim's page shows it. */
export interface AttachedCertificateView {
	readonly id: string;
	/** `NPA level 2`, `Explicit strategy, dimension 2`. */
	readonly label: string;
	readonly source: string;
	readonly by: string;
	readonly at: string;
	readonly bytes: number;
	/** What it proves in the claim's normalisation; `at least 2 and at most 3`; null: of another inequality. */
	readonly proves: string | null;
	/** What the check did. */
	readonly method: string;
}
