import type { Schema } from 'hast-util-sanitize';

/**
 * All that a text of ours may become: no image, no style, no id, no handler, and classes of our own
 * only. Whatever is not named here is taken out; its text stays.
 */
export const ALLOWED_HTML: Schema = {
	tagNames: [
		...['p', 'br', 'hr', 'h4', 'h5', 'h6', 'blockquote', 'ul', 'ol', 'li', 'pre'],
		...['em', 'strong', 'del', 'code', 'a', 'span'],
		...['table', 'thead', 'tbody', 'tr', 'th', 'td']
	],
	attributes: {
		a: ['href', 'rel'],
		ol: ['start'],
		th: [['align', 'left', 'right', 'center']],
		td: [['align', 'left', 'right', 'center']],
		span: [['className', 'formula', 'formula-display', 'mention']]
	},
	protocols: { href: ['https', 'http', 'mailto'] },
	required: {},
	ancestors: {},
	strip: ['script', 'style'],
	clobber: [],
	clobberPrefix: '',
	allowComments: false,
	allowDoctypes: false
};
