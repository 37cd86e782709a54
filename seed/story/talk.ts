import { addComment } from '../../src/lib/server/services/comments/add-comment';
import { findClaim } from '../../src/lib/server/services/claims/find-claim';
import type { GroupContext } from '../../src/lib/server/context';
import type { Story } from './story';

/** What the invented group says about its claims and inequalities. */
export async function tellTalk(story: Story): Promise<void> {
	const { clock, people } = story;
	clock.set(13, 13);
	await onClaim(
		story,
		people.member,
		'i3322-level-taken-for-quantum',
		'Row 4 reads like the maximum itself, but `0.2515` is what products of one operator a party give. @tomas, do you have the journal version?'
	);
	clock.set(12, 16);
	await onClaim(
		story,
		people.maintainer,
		'i3322-level-taken-for-quantum',
		'I do. The heading says "maximum", the method section says level $1 + AB$. So the value is right for\n\n$$\\max_{\\Gamma \\succeq 0} \\; \\langle I_{3322} \\rangle = 0.2514709\\ldots$$\n\nand wrong for what the heading claims.'
	);
	clock.set(8, 10);
	await onClaim(
		story,
		people.owner,
		'cglmp3-quantum',
		'For the talk next week: cite this one, **not** the value for the maximally entangled state.\n\n- maximum: $2.9149$\n- maximally entangled: $2.8729$'
	);
	clock.set(5, 12);
	await onClaim(
		story,
		people.member,
		'efficiency',
		'@ines the closed form $2(\\sqrt{2} - 1) \\approx 0.8284$ would agree with the figure. I will check what they assume.'
	);
	clock.set(3, 17);
	const number = story.numbers.get('i3322-quantum') ?? NaN;
	const { inequalityId } = await findClaim(people.owner.db.read, people.owner, number);
	if (inequalityId) {
		await addComment(people.maintainer, {
			subject: 'inequality',
			subjectId: inequalityId,
			body: 'Mind the normalisation: in correlators this is $4 I + 4$, so $0.2509$ becomes $5.0036$.'
		});
	}
}

async function onClaim(
	{ numbers }: Story,
	by: GroupContext,
	key: string,
	body: string
): Promise<void> {
	const claim = await findClaim(by.db.read, by, numbers.get(key) ?? NaN);
	await addComment(by, { subject: 'claim', subjectId: claim.id, body });
}
