import forms from '@tailwindcss/forms';
import type { Config } from 'tailwindcss';

const color = (name: string) => `var(--${name})`;

/** Names of the design's tokens; their values live once, in src/app.css. */
export default {
	content: ['./src/**/*.{html,ts,svelte}'],
	darkMode: ['variant', '&:where(.dark, .dark *)'],
	theme: {
		colors: {
			transparent: 'transparent',
			current: 'currentColor',
			ground: color('ground'),
			sheet: color('sheet'),
			ink: color('ink'),
			quiet: color('quiet'),
			line: color('line'),
			faint: color('faint'),
			control: color('control'),
			accent: { DEFAULT: color('accent'), soft: color('accent-soft'), ink: color('accent-ink') },
			agreement: { DEFAULT: color('agreement'), soft: color('agreement-soft') },
			discrepancy: { DEFAULT: color('discrepancy'), soft: color('discrepancy-soft') },
			open: { DEFAULT: color('open'), soft: color('open-soft') },
			backdrop: color('backdrop')
		},
		fontFamily: {
			sans: ['"Atkinson Hyperlegible Next Variable"', 'system-ui', 'sans-serif'],
			mono: ['"Atkinson Hyperlegible Mono Variable"', 'ui-monospace', 'monospace'],
			serif: ['"STIX Two Text"', 'Georgia', 'serif']
		},
		fontSize: {
			small: ['13px', '18px'],
			body: ['15px', '22px'],
			lead: ['18px', '26px'],
			title: ['24px', '30px'],
			page: ['30px', '36px'],
			hero: ['42px', '48px']
		},
		fontWeight: { normal: '400', semibold: '600', bold: '700' },
		boxShadow: { none: 'none', floating: 'var(--floating)' },
		borderRadius: { none: '0', control: '6px', sheet: '8px', full: '9999px' }
	},
	plugins: [forms({ strategy: 'class' })]
} satisfies Config;
