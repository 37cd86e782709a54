import { sendAuthorMessage } from '../../src/lib/server/services/author-messages/send-author-message';
import { attachNotice } from '../../src/lib/server/services/claim-notices/attach-notice';
import { findClaim } from '../../src/lib/server/services/claims/find-claim';
import { publishClaim } from '../../src/lib/server/services/claims/publish-claim';
import { confirmTranscription } from '../../src/lib/server/services/transcriptions/confirm-transcription';
import type { Context } from '../../src/lib/server/context';
import type { Story } from './story';

const CORRECTION = `@article{lindmark2012,
  author  = {Lindmark, Saga},
  title   = {Erratum: Three settings on two spins},
  journal = {Journal of Invented Physics},
  volume  = {13},
  pages   = {12},
  year    = {2012},
  doi     = {10.5555/jip.2012.0012}
}`;

/**
 * A discrepancy that a second person compared with the paper and a maintainer published; an author
 * answers, and an erratum is attached.
 */
export async function tellPublication(
	{ people, numbers, clock }: Story,
	anonymous: Context
): Promise<void> {
	const number = numbers.get('i3322-level-taken-for-quantum') ?? NaN;
	const claim = await findClaim(anonymous.db.read, people.owner, number);
	clock.set(12, 17);
	await confirmTranscription(people.maintainer, number, {
		valueMatches: 'yes',
		locatorMatches: 'yes',
		inequalityMatches: 'yes',
		note: '',
		version: claim.version
	});
	clock.set(11, 13);
	await publishClaim(people.owner, number);
	clock.set(4, 10);
	await sendAuthorMessage(anonymous, claim.id, {
		name: 'Saga Lindmark',
		email: 'saga@fictional.example',
		message:
			'You are right: the row shows the value of the relaxation with products of one operator a party, and the heading should have said so. A correction has appeared.'
	});
	clock.set(4, 17);
	await attachNotice(people.owner, number, {
		kind: 'erratum',
		bibtex: CORRECTION,
		note: 'Renames the row of Table II.'
	});
}
