import { error, redirect, type RequestEvent } from '@sveltejs/kit';
import { openedDatabase } from '../application';
import type { Context, GroupContext, UserContext } from '../context';
import { hasRole, type Role } from '../../ledger/roles';
import { securityEvent } from '../log';
import { groupContext } from '../services/groups/group-context';

/** The context of a request, whoever sends it. */
export function contextOf(event: RequestEvent): Context {
	const { actor, requestId } = event.locals;
	return { db: openedDatabase(), actor, requestId, now: () => new Date() };
}

/**
 * The context of a page or endpoint for everyone: nobody in particular asks, so that nothing can
 * be shown to one that another may not see.
 */
export function publicContext(event: RequestEvent): Context {
	return { ...contextOf(event), actor: null };
}

/**
 * The context of someone who has signed in. A page visited without having done so leads to
 * signing in and back; anything else gets 401.
 */
export function requireUser(event: RequestEvent): UserContext {
	const ctx = contextOf(event);
	const { actor } = ctx;
	if (actor) return { ...ctx, actor };
	const isPage = event.request.method === 'GET' && !event.url.pathname.startsWith('/api/');
	if (isPage) {
		redirect(303, `/sign-in?next=${encodeURIComponent(event.url.pathname + event.url.search)}`);
	}
	error(401, 'Sign in first.');
}

/**
 * The context of the site's administrator, whom MERESTONE_ADMINS names. Anybody else is answered
 * as if there were nothing.
 */
export function requireAdmin(event: RequestEvent): UserContext {
	const ctx = requireUser(event);
	if (ctx.actor.isAdmin) return ctx;
	securityEvent('denied', { user: ctx.actor.id, route: event.route.id, request: ctx.requestId });
	error(404, 'There is nothing here.');
}

/**
 * The context inside the group whose slug the route names. Someone outside learns nothing: a
 * group that is not theirs is answered like one that is not there.
 */
export async function requireRole(
	event: RequestEvent,
	atLeast: Role,
	slug = event.params.slug ?? ''
): Promise<GroupContext> {
	const ctx = requireUser(event);
	const found = await groupContext(ctx, { slug });
	if (!found) error(404, 'There is no such group, or you are not in it.');
	leadOn(event, slug, found.group.slug);
	if (!hasRole(found.role, atLeast)) {
		securityEvent('denied', {
			user: ctx.actor.id,
			group: found.group.id,
			route: event.route.id,
			request: ctx.requestId
		});
		error(403, `This takes the role of ${atLeast} or more; yours here is ${found.role}.`);
	}
	return found;
}

/**
 * From a group's former address to the page at its new one. A form sent from a page that was open
 * when the address changed is served where it arrives, and so is the API.
 */
function leadOn(event: RequestEvent, asked: string, slug: string): void {
	if (asked === slug || !['GET', 'HEAD'].includes(event.request.method)) return;
	const { pathname, search } = event.url;
	const former = `/g/${asked}`;
	if (pathname !== former && !pathname.startsWith(`${former}/`)) return;
	redirect(308, `/g/${slug}${pathname.slice(former.length)}${search}`);
}
