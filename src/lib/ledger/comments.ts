export const COMMENT_SUBJECTS = ['claim', 'task', 'inequality'] as const;
export type CommentSubject = (typeof COMMENT_SUBJECTS)[number];

/** So long a comment is edited without a trace: time to mend a slip. Later texts keep a history. */
export const EDIT_MINUTES = 15;

export const LONGEST_COMMENT = 10_000;
