/**
 * The people of the demonstration: one studio, its admin, two instructors, six students. All of them,
 * their names and what they did are invented.
 */
import { LEARNER_PROFILES, type LearnerProfile } from '../../../drills/simulation/learner';
import type { Role } from '../../auth';

export interface DemoPerson {
	key: string;
	name: string;
	email: string;
	password: string;
	role: Role;
}

const person = (key: string, name: string, role: Role, password: string): DemoPerson => ({
	key,
	name,
	email: `${key}@tidewater-studio.example`,
	password,
	role
});

export const ADMIN = person('piers', 'Piers Lanternby', 'admin', 'keeps-the-lamp-lit-61');
export const TEACHER = person(
	'ottoline',
	'Ottoline Brackwater',
	'instructor',
	'listens-past-the-blow-24'
);
export const COLLEAGUE = person(
	'lorcan',
	'Lorcan Thistlemere',
	'instructor',
	'always-a-check-note-38'
);

export interface DemoStudent extends DemoPerson {
	profile: LearnerProfile;
	seed: number;
	/** Days before today on which this student stops for now. */
	awayDays: number;
}

const student = (
	key: string,
	name: string,
	password: string,
	course: Pick<DemoStudent, 'profile' | 'seed' | 'awayDays'>
): DemoStudent => ({ ...person(key, name, 'student', password), ...course });

/** Works often and gets there late: slow beats first, thirds and sixths last. */
const PATIENT: LearnerProfile = {
	thresholdHz: [1.8, 0.35],
	weber: [0.42, 0.2],
	care: [0.08, 0.5],
	handCents: 0.3,
	lapse: 0.1,
	asks: 0.3,
	learningBlocks: 22,
	daysAWeek: 4,
	blocksADay: 1.8
};

export const STUDENTS: readonly DemoStudent[] = [
	student('jory', 'Jory Copperthwick', 'one-string-at-a-time-52', {
		profile: PATIENT,
		seed: 202,
		awayDays: 1
	}),
	student('mirabel', 'Mirabel Dunnock', 'the-beat-slows-down-17', {
		profile: LEARNER_PROFILES.gifted,
		seed: 2202,
		awayDays: 1
	}),
	student('ansel', 'Ansel Featherlow', 'wide-fourth-narrow-fifth-9', {
		profile: LEARNER_PROFILES.steady,
		seed: 303,
		awayDays: 0
	}),
	student('sunniva', 'Sunniva Marlock', 'a-hair-down-then-up-40', {
		profile: LEARNER_PROFILES.slow,
		seed: 404,
		awayDays: 0
	}),
	student('corin', 'Corin Oddershaw', 'stops-at-the-first-quiet-3', {
		profile: LEARNER_PROFILES.stuck,
		seed: 202,
		awayDays: 0
	}),
	student('edda', 'Edda Thornquill', 'back-again-next-week-88', {
		profile: LEARNER_PROFILES.irregular,
		seed: 404,
		awayDays: 9
	})
];

/** Who can sign in to the demonstration, the most useful first. */
export const DEMO_SIGN_INS: readonly Omit<DemoPerson, 'key'>[] = [
	TEACHER,
	...STUDENTS,
	COLLEAGUE,
	ADMIN
].map(({ name, email, password, role }) => ({ name, email, password, role }));

/** A string or a pair that a student checks on a real piano. */
export interface DemoCheckPlan {
	student: string;
	/** Days before today, and the hour. */
	daysAgo: number;
	hour: number;
	kind: 'note' | 'unison' | 'interval';
	notes: readonly string[];
	/** How far the moving string is from where it belongs, cents. */
	offCents: number;
	piano: 'short-upright' | 'medium-grand' | 'long-grand';
}

const check = (
	owner: string,
	daysAgo: number,
	kind: DemoCheckPlan['kind'],
	notes: readonly string[],
	offCents: number,
	piano: DemoCheckPlan['piano']
): DemoCheckPlan => ({ student: owner, daysAgo, hour: 18, kind, notes, offCents, piano });

export const CHECK_PLANS: readonly DemoCheckPlan[] = [
	check('jory', 24, 'unison', ['A4'], 2.6, 'short-upright'),
	check('jory', 10, 'unison', ['A4'], 1.1, 'short-upright'),
	check('jory', 3, 'interval', ['A3', 'D4'], 1.2, 'short-upright'),
	check('mirabel', 17, 'unison', ['C5'], 0.7, 'long-grand'),
	check('mirabel', 5, 'interval', ['F3', 'A3'], -0.8, 'long-grand'),
	check('ansel', 12, 'note', ['A4'], -3.5, 'medium-grand'),
	check('ansel', 6, 'unison', ['E4'], 1.6, 'medium-grand'),
	check('corin', 20, 'unison', ['A4'], 4.2, 'short-upright')
];

/** What the instructor wrote; the newest one waits to be read. */
export const REMARKS: readonly {
	student: string;
	daysAgo: number;
	/** The student's latest block of this drill before then, or nothing in particular. */
	about: 'unison' | 'interval' | null;
	seen: boolean;
	text: string;
}[] = [
	{
		student: 'corin',
		daysAgo: 18,
		about: 'unison',
		seen: true,
		text: 'You stop at the first quiet place. Go past it on both sides until it beats again, then come back to the middle.'
	},
	{
		student: 'sunniva',
		daysAgo: 13,
		about: null,
		seen: true,
		text: 'Strike again sooner. A tone that has half died tells you nothing about a slow beat.'
	},
	{
		student: 'jory',
		daysAgo: 9,
		about: 'interval',
		seen: true,
		text: 'Before you count, pass through beatless once. Then you know on which side you stand.'
	},
	{
		student: 'jory',
		daysAgo: 1,
		about: 'interval',
		seen: false,
		text: 'Your fifths and fourths are close now. Leave them alone when they roll slowly, and spend the time on thirds and sixths: go for the rate, not for quiet.'
	},
	{
		student: 'edda',
		daysAgo: 2,
		about: null,
		seen: false,
		text: 'Two short blocks this week are worth more than six on Sunday. Begin with unisons.'
	}
];
