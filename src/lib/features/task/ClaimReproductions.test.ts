import { render } from '@testing-library/svelte';
import { expect, it } from 'vitest';
import { makeSubmission } from '../../../../tests/factories/task-views';
import ClaimReproductions from './ClaimReproductions.svelte';

const found = (over: Parameters<typeof makeSubmission>[0] = {}) => ({
	...makeSubmission({ state: 'accepted', ...over }),
	taskNumber: 4,
	commentHtml: ''
});

it('shows nothing while nobody has reproduced anything', () => {
	const { container } = render(ClaimReproductions, { reproductions: [], base: '/g/a' });
	expect(container.textContent).toBe('');
});

it('names who found it, with what, the files and who accepted it', () => {
	const file = { id: 'f1', name: 'log.txt', mediaType: 'text/plain', bytes: 812, sha256: 'ab12' };
	const { container, getByRole } = render(ClaimReproductions, {
		reproductions: [
			found({
				by: { id: 'u1', name: 'Wren Aldous' },
				program: 'own program',
				programVersion: '2.1',
				files: [file],
				decidedBy: { id: 'u2', name: 'Mae Maintainer' },
				decidedAt: '2026-11-20T10:00:00.000Z'
			})
		],
		base: '/g/a'
	});
	for (const fact of [
		'Wren Aldous',
		'own program, version 2.1',
		'SHA-256 ab12',
		'Accepted by Mae Maintainer'
	]) {
		expect(container.textContent?.replace(/\s+/g, ' ')).toContain(fact);
	}
	expect(getByRole('link', { name: 'All of task 4' }).getAttribute('href')).toBe('/g/a/tasks/4');
});

it('says who accepted what a certificate excluded later', () => {
	const { container } = render(ClaimReproductions, {
		reproductions: [
			found({
				state: 'contradicted',
				decision: 'Contradicts the certificate: at most 2.83 is proved.',
				decidedBy: { id: 'u2', name: 'Mae Maintainer' },
				decidedAt: '2026-11-20T10:00:00.000Z'
			})
		],
		base: '/g/a'
	});
	const text = container.textContent?.replace(/\s+/g, ' ');
	expect(text).toContain('at most 2.83 is proved');
	expect(text).toMatch(/Accepted by Mae Maintainer, contradicted .*2026/);
});
