/** Which rooms stand in the top line, by role. */

export type Role = 'student' | 'instructor' | 'admin';

export interface Room {
	readonly href: string;
	readonly name: string;
}

/** Where each role begins after signing in. */
export const HOME: Readonly<Record<Role, string>> = {
	student: '/today',
	instructor: '/classes',
	admin: '/admin/users'
};

const PRACTICE: readonly Room[] = [
	{ href: '/today', name: 'Today' },
	{ href: '/practice', name: 'Practice' },
	{ href: '/string-check', name: 'String check' },
	{ href: '/progress', name: 'Progress' }
];

const ROOMS: Readonly<Record<Role, readonly Room[]>> = {
	student: PRACTICE,
	instructor: [{ href: '/classes', name: 'Classes' }, ...PRACTICE],
	admin: [
		{ href: '/admin/users', name: 'Users' },
		{ href: '/admin/mail', name: 'Mail' },
		{ href: '/admin/audit', name: 'Audit' }
	]
};

export const roomsOf = (role: Role): readonly Room[] => ROOMS[role];

/** Whether a path lies in a room: the room itself or below it. */
export const isIn = (room: Room, path: string): boolean =>
	path === room.href || path.startsWith(`${room.href}/`);
