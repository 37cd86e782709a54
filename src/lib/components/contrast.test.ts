import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

/** WCAG 2.2, 1.4.3: body text; 1.4.11: edges of controls. */
const TEXT = 4.5;
const CONTROL = 3;

const css = readFileSync('src/app.css', 'utf8');
const tokens = new Map(
	[...css.matchAll(/--([\w-]+): light-dark\((#[0-9a-f]{6}), (#[0-9a-f]{6})\)/g)].map(
		([, name = '', light = '', dark = '']) => [name, { light, dark }] as const
	)
);

/** Relative luminance as WCAG 2.2 defines it, of sRGB. */
function luminance(hex: string): number {
	const [r = 0, g = 0, b = 0] = [1, 3, 5].map((at) => {
		const channel = parseInt(hex.slice(at, at + 2), 16) / 255;
		return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4;
	});
	return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}

function contrast(a: string, b: string): number {
	const [high = 0, low = 0] = [luminance(a), luminance(b)].sort((x, y) => y - x);
	return (high + 0.05) / (low + 0.05);
}

const pairs: readonly (readonly [ink: string, ground: string, least: number])[] = [
	...['ground', 'sheet', 'faint', 'open-soft', 'accent-soft'].map(
		(on) => ['ink', on, TEXT] as const
	),
	...['ground', 'sheet', 'faint', 'open-soft', 'accent-soft'].map(
		(on) => ['quiet', on, TEXT] as const
	),
	...['ground', 'sheet', 'faint'].map((on) => ['accent', on, TEXT] as const),
	['accent-ink', 'accent', TEXT],
	...['agreement', 'discrepancy', 'open'].flatMap((tone) => [
		[tone, `${tone}-soft`, TEXT] as const,
		[tone, 'sheet', TEXT] as const
	]),
	['discrepancy', 'ground', TEXT],
	['control', 'sheet', CONTROL],
	['control', 'ground', CONTROL]
];

describe.each(['light', 'dark'] as const)('tokens, %s', (mode) => {
	it('measures as WCAG does', () => {
		expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 6);
		// #777777 on white, 4.478: the well-known near miss.
		expect(contrast('#777777', '#ffffff')).toBeCloseTo(4.48, 2);
	});

	it.each(pairs)('%s on %s has at least %f : 1', (ink, ground, least) => {
		const [front, back] = [tokens.get(ink)?.[mode], tokens.get(ground)?.[mode]];
		if (!front || !back) throw new Error(`app.css has no token ${front ? ground : ink}`);
		expect(contrast(front, back)).toBeGreaterThanOrEqual(least);
	});
});
