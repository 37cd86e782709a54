/** The part of Citation.js that is used; the packages ship no declarations. */
declare module '@citation-js/core' {
	export class Cite {
		constructor(input: string | object, options?: { forceType?: string });
		data: Record<string, unknown>[];
		format(
			format: 'bibliography',
			options: { format: 'text'; template: string; lang: string }
		): string;
	}
}
declare module '@citation-js/plugin-bibtex';
declare module '@citation-js/plugin-csl';
