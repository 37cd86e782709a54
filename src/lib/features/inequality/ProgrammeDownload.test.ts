import { render } from '@testing-library/svelte';
import { expect, it } from 'vitest';
import ProgrammeDownload from './ProgrammeDownload.svelte';

it.each([
	[2, 2, ['1', '1+AB', '2', '3']],
	// Level 1 has moments of two operators at most, level 2 of four.
	[3, 2, ['1', '1 per party', '2', '2 per party', '3']],
	[3, 3, ['1 per party', '2', '2 per party', '3']],
	[5, 5, ['1 per party', '2 per party', '3']]
])('offers the levels that hold terms: %i parties, %i in a term', (parties, degree, levels) => {
	const { getByLabelText } = render(ProgrammeDownload, { inequalityId: 'a', parties, degree });
	const options = [...getByLabelText('Level').querySelectorAll('option')];
	expect(options.map(({ value }) => value)).toEqual(levels);
});
