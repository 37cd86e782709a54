/** Where calendar addresses are made and revoked, from whichever page; it leads back there. */
export const MAKE_CALENDAR = '/home/tasks?/makeCalendar';
export const REVOKE_CALENDAR = '/home/tasks?/revokeCalendar';
