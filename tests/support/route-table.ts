/**
 * Who may do what at each route: the table that the walk through all routes is checked against. A
 * route file or a handler that is not in it makes the walk fail.
 */
import type { Who, World } from './world';

/** `ok`: served (2xx, or sent on elsewhere); `sign-in`: sent to sign in; a number: that status. */
export type Expected = 'ok' | 'sign-in' | number;
export type Row = {
	expected: Record<Who, Expected>;
	form?: (world: World) => Record<string, string>;
	json?: (world: World) => unknown;
};

const all = (value: Expected): Record<Who, Expected> => ({
	visitor: value,
	owner: value,
	fellow: value,
	teacher: value,
	colleague: value,
	admin: value
});
const open = all('ok');
const signedIn = { ...open, visitor: 'sign-in' } as const;
const learners = { ...signedIn, admin: 403 } as const;
const ownerOnly = { ...learners, fellow: 404, teacher: 404, colleague: 404 } as const;
const instructors = { ...signedIn, owner: 403, fellow: 403, admin: 403 } as const;
const teacherOnly = { ...instructors, colleague: 404 } as const;
const admins = { ...all(403), visitor: 'sign-in', admin: 'ok' } as const;
const atApi = (row: Record<Who, Expected>) => ({ ...row, visitor: 401 as const });

const page = (expected: Record<Who, Expected>): Record<string, Row> => ({ load: { expected } });
/** An action that finds nothing to do in an empty form. */
const emptyForm = (expected: Record<Who, Expected>): Row => ({ expected, form: () => ({}) });

const CLASS = '(instructor)/classes/[id]';
const STUDENT = `${CLASS}/students/[studentId]`;

export const ROUTES: Readonly<Record<string, Record<string, Row>>> = {
	'': page(open),
	'(auth)/sign-in': { load: { expected: open }, 'actions.default': emptyForm(all(400)) },
	'(auth)/forgot': { load: { expected: open }, 'actions.default': emptyForm(all(400)) },
	'(auth)/reset/[token]': { load: { expected: open }, 'actions.default': emptyForm(all(400)) },
	'(auth)/sign-out': { load: { expected: open }, 'actions.default': emptyForm(open) },
	'(auth)/account': {
		load: { expected: signedIn },
		'actions.name': { expected: signedIn, form: () => ({ name: 'Wendel Ashmarsh' }) },
		'actions.password': emptyForm({ ...all(400), visitor: 'sign-in' }),
		'actions.everywhere': emptyForm(signedIn)
	},
	'(public)/invitation/[token]': {
		load: { expected: open },
		'actions.newcomer': emptyForm(all(400)),
		'actions.member': emptyForm({ ...all(410), visitor: 'sign-in' })
	},
	'(public)/join/[token]': {
		load: { expected: open },
		'actions.ask': emptyForm(all(400)),
		'actions.join': emptyForm({ ...all(410), visitor: 'sign-in' })
	},
	'(student)/today': {
		load: { expected: learners },
		'actions.putAway': { expected: ownerOnly, form: ({ remarkId }) => ({ remark: remarkId }) }
	},
	'(student)/practice': page(learners),
	'(student)/practice/unison': page(learners),
	'(student)/practice/interval': page(learners),
	'(student)/practice/attempts/[id]': page(ownerOnly),
	'(student)/progress': page(learners),
	'(student)/string-check': page(learners),
	'(instructor)/classes': {
		load: { expected: instructors },
		'actions.default': { expected: instructors, form: () => ({ name: 'Saturday class' }) }
	},
	[CLASS]: {
		load: { expected: teacherOnly },
		'actions.invite': {
			expected: teacherOnly,
			form: () => ({ email: 'ines@studio.example', __superform_id: 'invite' })
		},
		'actions.withdraw': {
			expected: teacherOnly,
			form: ({ invitationId }) => ({ invitation: invitationId })
		},
		'actions.newLink': emptyForm(teacherOnly),
		'actions.facts': {
			expected: teacherOnly,
			form: () => ({ name: 'Renamed', __superform_id: 'facts' })
		},
		'actions.putAway': emptyForm(teacherOnly)
	},
	[STUDENT]: {
		load: { expected: teacherOnly },
		'actions.remark': {
			expected: teacherOnly,
			form: ({ params }) => ({ text: 'Listen longer.', attemptId: params.attemptId })
		},
		'actions.remove': emptyForm(teacherOnly)
	},
	[`${STUDENT}/attempts/[attemptId]`]: page(teacherOnly),
	'api/attempts': {
		GET: { expected: atApi(learners) },
		POST: { expected: atApi(ownerOnly), json: ({ attempt }) => attempt }
	},
	'api/string-checks': { POST: { expected: atApi(ownerOnly), json: ({ check }) => check } },
	'api/health': { GET: { expected: open } }
};

/** Everything an admin's page can do is an admin's alone. */
export const ADMIN_EXPECTED = admins;
