import { z } from 'zod';
import { SENSES } from '../ledger/claim';

/** Which relaxation is asked for as SDPA text; the names of a form's fields. */
export const sdpaQuery = z.object({
	level: z.string().max(40, 'At most 40 characters').default('1'),
	/** There at all: every probability is held non-negative, as a checked box is sent. */
	nonNegative: z.string().max(10, 'At most 10 characters').optional(),
	sense: z.enum(SENSES).default('max')
});

export type SdpaQuery = z.infer<typeof sdpaQuery>;
