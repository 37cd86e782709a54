import { render } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import { makeSubmission } from '../../../../tests/factories/task-views';
import Submission from './Submission.svelte';

const props = { commentHtml: '', name: '', base: '/g/a' };

describe('Submission', () => {
	it('says plainly that an accepted value contradicts the certificate', () => {
		const { getByRole } = render(Submission, {
			...props,
			submission: makeSubmission({ state: 'contradicted', decision: 'NPA level 2 excludes it.' })
		});
		const alert = getByRole('alert').textContent;
		expect(alert).toContain('Contradicts the certificate');
		expect(alert).toContain('NPA level 2 excludes it.');
	});

	it('shows what the check proves, and lets the certificate be had', () => {
		const check = {
			accepted: true,
			label: 'NPA level 2',
			lower: null,
			upper: '0.250940',
			exact: null,
			note: ''
		};
		const { container, getByRole } = render(Submission, {
			...props,
			submission: makeSubmission({ kind: 'certificate', check, printed: '', reading: null })
		});
		expect(container.textContent).toContain('accepts it');
		expect(container.textContent).toContain('at most 0.250940');
		const link = getByRole('link', { name: 'The certificate as handed in' });
		expect(link.getAttribute('href')).toBe('/g/a/submissions/s1/certificate');
	});

	it('names each file with its size and what proves a copy', () => {
		const file = { id: 'f1', name: 'log.txt', mediaType: 'text/plain', bytes: 812, sha256: 'ab12' };
		const { container, getByRole } = render(Submission, {
			...props,
			submission: makeSubmission({ files: [file] })
		});
		expect(getByRole('link', { name: 'log.txt' }).getAttribute('href')).toBe('/g/a/files/f1');
		expect(container.textContent).toMatch(/812\u2009bytes[\s\S]*ab12/);
	});

	it('has no empty list beside words only, and shows what was said on accepting', () => {
		const { container } = render(Submission, {
			...props,
			submission: makeSubmission({
				kind: 'statement',
				state: 'accepted',
				program: '',
				programVersion: '',
				method: '',
				decidedBy: { id: 'mae', name: 'Mae Maintainer' },
				decision: '*Same* digits',
				decisionHtml: '<p><em>Same</em> digits</p>'
			})
		});
		expect(container.querySelector('dl')).toBeNull();
		expect(container.querySelector('em')?.textContent).toBe('Same');
	});
});
