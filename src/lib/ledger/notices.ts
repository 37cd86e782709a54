/** What is attached to a claim after its paper appeared. */
export const NOTICE_KINDS = ['erratum', 'newer-version'] as const;
export type NoticeKind = (typeof NOTICE_KINDS)[number];

export const NOTICE_LABELS: Readonly<Record<NoticeKind, string>> = {
	erratum: 'Erratum',
	'newer-version': 'Newer version'
};
