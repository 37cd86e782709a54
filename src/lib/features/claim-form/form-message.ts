import type { FieldIssueView } from '../../schemas/field-issue';
import type { ReadingView } from '../../schemas/views';

/** What the server says of a form it sends back, beside the errors at the fields. */
export interface ClaimFormMessage {
	readonly text: string;
	/** Issues whose position in the text is known. */
	readonly issues: readonly FieldIssueView[];
	/** What was understood of it, where a button asked for that; nothing is entered. */
	readonly reading?: ReadingView;
	/** The session has ended: the form asks to sign in, within itself. */
	readonly signedOut?: boolean;
	/** The session was renewed from within the form; nothing is entered yet. */
	readonly signedIn?: boolean;
}
