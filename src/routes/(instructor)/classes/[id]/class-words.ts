import type { DrillStanding, StudentRow } from '$lib/server/services/class-overview';

const COUNTS = [
	'None',
	'One',
	'Two',
	'Three',
	'Four',
	'Five',
	'Six',
	'Seven',
	'Eight',
	'Nine',
	'Ten',
	'Eleven',
	'Twelve'
];

/** "Six", "14"; for the beginning of a sentence. */
export function countWord(count: number): string {
	return COUNTS[count] ?? String(count);
}

/** Days without practice after which a student is flagged. */
const AWAY_DAYS = 6;
const DAY_MS = 86_400_000;

/** "week 9 of 10", "begins in 3 days", or nothing where the days are not known. */
export function whenWords(
	startsOn: string | null,
	endsOn: string | null,
	today: string
): string | null {
	if (!startsOn) return null;
	const day = Math.round((Date.parse(today) - Date.parse(startsOn)) / DAY_MS);
	if (day < 0) return day === -1 ? 'begins tomorrow' : `begins in ${-day} days`;
	if (!endsOn) return `week ${Math.floor(day / 7) + 1}`;
	const length = Math.round((Date.parse(endsOn) - Date.parse(startsOn)) / DAY_MS) + 1;
	if (day >= length) return 'it is over';
	return length <= 14
		? `day ${day + 1} of ${length}`
		: `week ${Math.floor(day / 7) + 1} of ${Math.ceil(length / 7)}`;
}

/** What a student needs to be looked at for; null for nothing. */
export function flagOf(student: Pick<StudentRow, 'daysAway'>): string | null {
	if (student.daysAway === null) return 'Not begun yet';
	return student.daysAway >= AWAY_DAYS ? `Away for ${student.daysAway} days` : null;
}

function insideCount(students: readonly StudentRow[], drill: DrillStanding['drill']): number {
	return students.filter((student) => student.drills[drill]?.verdict === 'inside').length;
}

/** The class in two sentences: who is there, and what stands out. */
export function leadWords(students: readonly StudentRow[], when: string | null): string {
	if (students.length === 0) return `Nobody is in it yet${when ? `; ${when}` : ''}.`;
	const who = `${countWord(students.length)} ${students.length === 1 ? 'student' : 'students'}`;
	const begun = students.filter((student) => student.attempts > 0).length;
	const first = `${who}${when ? `, ${when}` : ''}.`;
	if (begun === 0) return `${first} Nobody has begun yet.`;
	const unisons = insideCount(students, 'unison');
	const intervals = insideCount(students, 'interval');
	const away = students.filter((student) => flagOf(student) !== null).length;
	const nobody = (count: number) => (count === 0 ? 'nobody' : countWord(count).toLowerCase());
	const last = away > 0 ? `; ${nobody(away)} not at work` : '';
	return `${first} Inside for sure: the unisons of ${nobody(unisons)}, the intervals of ${nobody(intervals)}${last}.`;
}
