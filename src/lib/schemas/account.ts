import { z } from 'zod';
import { PASSWORD_LENGTH, passwordProblem } from './password-rules';

export const emailAddress = z
	.string()
	.trim()
	.toLowerCase()
	.min(1, 'Give your e-mail address')
	.max(254, 'This address is too long')
	.pipe(z.email('This is no e-mail address; it should look like name@place.example'));

/** Enough to bound the work of a check; a wrong one is refused like any other. */
const anyPassword = z
	.string()
	.min(1, 'Give your password')
	.max(1_024, `No password here has more than ${PASSWORD_LENGTH.max} characters`);

/**
 * One line of text without control characters, so that it is safe in a mail's header; and without
 * those that turn the writing direction around, which would turn the words beside it, too.
 */
export const oneLine = (limit: number, missing: string) =>
	z
		.string()
		.trim()
		.min(1, missing)
		.max(limit, `At most ${limit} characters`)
		.regex(
			/^[^\p{Cc}\u2028\u2029\u202a-\u202e\u2066-\u2069]*$/u,
			'Only one line of text, without control characters'
		);

/** Where to go afterwards; read with `localPath`. */
const next = z.string().max(2_000).default('');

/**
 * The path if it is one of this site, else nothing: `//host` and `/\host` leave it although they
 * start like a path.
 */
export function localPath(path: string): string | null {
	return /^\/(?![/\\])[^\p{Cc}\\]*$/u.test(path) ? path : null;
}

export const signInInput = z.object({
	email: emailAddress,
	password: anyPassword,
	next
});
export const signUpInput = z
	.object({
		name: oneLine(100, 'Give your name, as the others in a group should read it'),
		email: emailAddress,
		password: z.string().max(1_024, `Use at most ${PASSWORD_LENGTH.max} characters`),
		next
	})
	.check(({ value, issues }) => {
		const message = passwordProblem(value.password, value);
		if (message)
			issues.push({ code: 'custom', input: value.password, path: ['password'], message });
	});
export const changePasswordInput = z.object({
	current: anyPassword,
	password: z.string().max(1_024, `Use at most ${PASSWORD_LENGTH.max} characters`)
});
export type ChangePasswordInput = z.infer<typeof changePasswordInput>;
