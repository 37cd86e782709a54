import { clearSessionCookie } from '$lib/server/auth/cookie';
import { contextOf } from '$lib/server/auth/guards';
import { signOut } from '$lib/server/services/users/sign-out';
import { redirect } from '@sveltejs/kit';
import type { RequestHandler } from './$types';

/** Signing out twice is no error. */
export const POST: RequestHandler = async (event) => {
	const { sessionId } = event.locals;
	if (sessionId) await signOut(contextOf(event), sessionId);
	clearSessionCookie(event.cookies);
	redirect(303, '/');
};
