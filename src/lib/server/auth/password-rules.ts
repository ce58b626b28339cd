import { COMMON_PASSWORDS } from './common-passwords';

/** Shortest password, in characters. */
export const SHORTEST_PASSWORD = 12;
/** bcrypt reads no further than this many bytes; a longer password would be cut in silence. */
export const LONGEST_PASSWORD_BYTES = 72;

/** Words that are common only as the heart of a password: with digits around them they are guessed. */
const HEARTS = new Set(
	`password passwort admin administrator welcome letmein qwerty qwertz azerty iloveyou monkey dragon
	master shadow sunshine princess football baseball superman batman login guest secret summer winter
	spring autumn hello freedom whatever trustno ebbtone piano music tuner`.split(/\s+/)
);

const ROWS = [
	'abcdefghijklmnopqrstuvwxyz',
	'01234567890123456789',
	'qwertyuiopasdfghjklzxcvbnm',
	'qwertzuiopasdfghjklyxcvbnm',
	'azertyuiopqsdfghjklmwxcvbn',
	'1qaz2wsx3edc4rfv5tgb6yhn7ujm8ik9ol0p'
];

const SIGNS: Record<string, string> = {
	'0': 'o',
	'1': 'l',
	'3': 'e',
	'4': 'a',
	'5': 's',
	'7': 't'
};
const plainLetters = (text: string) =>
	text
		.replace(/[@4]/g, 'a')
		.replace(/\$/g, 's')
		.replace(/!/g, 'i')
		.replace(/[013457]/g, (digit) => SIGNS[digit]);

/** Without the digits and signs at either end: `--sunshine2024!` becomes `sunshine`. */
const heartOf = (text: string) => text.replace(/^[^\p{L}]+|[^\p{L}]+$/gu, '');

function isCommon(lower: string): boolean {
	const heart = heartOf(lower);
	const spellings = [
		lower,
		heart,
		plainLetters(lower),
		plainLetters(heart),
		heartOf(plainLetters(lower))
	];
	return spellings.some((s) => COMMON_PASSWORDS.has(s) || HEARTS.has(s));
}

/** True for one piece twice or more often, such as `abcabcabcabc` or `lantern-lantern`. */
function repeatsItself(lower: string): boolean {
	return [...Array(Math.ceil(lower.length / 2)).keys()]
		.map((i) => i + 1)
		.some((size) => lower.slice(0, size).repeat(lower.length).startsWith(lower));
}

function runsAlongKeys(lower: string): boolean {
	const backwards = [...lower].reverse().join('');
	return ROWS.some((row) => row.includes(lower) || row.includes(backwards));
}

/** Whose password it is to be: it must not be made of that. */
export interface PasswordOwner {
	email?: string;
	name?: string;
}

function isAboutOwner(lower: string, owner: PasswordOwner): boolean {
	const letters = lower.replace(/[^\p{L}\p{N}]/gu, '');
	const parts = [
		owner.email,
		owner.email?.split('@')[0],
		owner.name,
		...(owner.name?.split(/\s+/) ?? [])
	];
	return parts
		.filter((part) => part !== undefined)
		.map((part) => part.toLowerCase().replace(/[^\p{L}\p{N}]/gu, ''))
		.some(
			(part) =>
				part.length >= 4 &&
				letters.replaceAll(part, '').replace(/\d/g, '').length < 4 &&
				letters.includes(part)
		);
}

/**
 * Says what is wrong with a password that somebody wants to choose.
 * @returns a sentence for the person, or null when the password will do.
 */
export function passwordFault(password: string, owner: PasswordOwner = {}): string | null {
	const lower = password.normalize('NFKC').toLowerCase();
	if ([...password].length < SHORTEST_PASSWORD) {
		return `Use at least ${SHORTEST_PASSWORD} characters; a few words in a row are easy to remember.`;
	}
	if (Buffer.byteLength(password, 'utf8') > LONGEST_PASSWORD_BYTES) {
		return `Use at most ${LONGEST_PASSWORD_BYTES} characters (fewer where they are accented).`;
	}
	if (repeatsItself(lower) || runsAlongKeys(lower) || new Set(lower).size < 5) {
		return 'This is a pattern that is guessed quickly. Choose a few unrelated words instead.';
	}
	if (isCommon(lower)) {
		return 'This is one of the passwords that are tried first. Choose a few unrelated words instead.';
	}
	if (isAboutOwner(lower, owner)) {
		return 'This is made of your own name or address. Choose a few unrelated words instead.';
	}
	return null;
}
