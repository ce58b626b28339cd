import type { Cents, Midi } from './units';

/** Pure fifth 3:2, cents. */
const PURE_FIFTH = 1200 * Math.log2(3 / 2);
/** Pythagorean comma: twelve pure fifths less seven octaves. */
const PYTHAGOREAN_COMMA = 12 * PURE_FIFTH - 8400;
/** Syntonic comma 81:80. */
const SYNTONIC_COMMA = 1200 * Math.log2(81 / 80);
/** Schisma: the difference of the two commas. */
const SCHISMA = PYTHAGOREAN_COMMA - SYNTONIC_COMMA;

/**
 * A temperament as a chain of fifths: pitch class of the first note, then how much each fifth is
 * narrowed, cents. Eleven fifths give twelve notes; the twelfth closes the circle.
 */
interface FifthChain {
	name: string;
	startPitchClass: number;
	narrowedBy: readonly Cents[];
}

const repeat = (times: number, cents: Cents): Cents[] => Array.from({ length: times }, () => cents);

const C = 0;
const E_FLAT = 3;
const quarterPythagorean = PYTHAGOREAN_COMMA / 4;
const quarterSyntonic = SYNTONIC_COMMA / 4;
const sixthPythagorean = PYTHAGOREAN_COMMA / 6;
const youngFirstRest = (PYTHAGOREAN_COMMA - 4 * ((3 / 16) * SYNTONIC_COMMA)) / 4;

/** Fifths from C: C-G G-D D-A A-E E-B B-F# F#-C# C#-G# G#-Eb Eb-Bb Bb-F (F-C closes). */
const CHAINS: Readonly<Record<string, FifthChain>> = {
	equal: { name: 'Equal', startPitchClass: C, narrowedBy: repeat(11, PYTHAGOREAN_COMMA / 12) },
	// Eleven fifths Eb … G#, wolf G#-Eb (Aaron 1523).
	meantone: {
		name: 'Quarter-comma meantone',
		startPitchClass: E_FLAT,
		narrowedBy: repeat(11, quarterSyntonic)
	},
	pythagorean: { name: 'Pythagorean', startPitchClass: E_FLAT, narrowedBy: repeat(11, 0) },
	// Werckmeister 1691: C-G, G-D, D-A, B-F# narrow by a quarter of the Pythagorean comma.
	'werckmeister-3': {
		name: 'Werckmeister III',
		startPitchClass: C,
		narrowedBy: [...repeat(3, quarterPythagorean), 0, 0, quarterPythagorean, ...repeat(5, 0)]
	},
	// Kirnberger, letter to Forkel 1779: C-G-D-A-E quarter syntonic comma, F#-C# by the schisma.
	'kirnberger-3': {
		name: 'Kirnberger III',
		startPitchClass: C,
		narrowedBy: [...repeat(4, quarterSyntonic), 0, 0, SCHISMA, ...repeat(4, 0)]
	},
	// F-C-G-D-A-E-B narrow by a sixth of the Pythagorean comma; F-C closes the circle.
	vallotti: {
		name: 'Vallotti',
		startPitchClass: C,
		narrowedBy: [...repeat(5, sixthPythagorean), ...repeat(6, 0)]
	},
	// Young 1800, Phil. Trans. 90:106: C-G-D-A-E 3/16 syntonic comma, F#…Bb pure, the rest equal.
	'young-1': {
		name: 'Young, first',
		startPitchClass: C,
		narrowedBy: [
			...repeat(4, (3 / 16) * SYNTONIC_COMMA),
			...repeat(2, youngFirstRest),
			...repeat(4, 0),
			youngFirstRest
		]
	},
	// Young 1800, same passage: C-G-D-A-E-B-F# narrow by a sixth of the comma, six pure fourths.
	'young-2': {
		name: 'Young, second',
		startPitchClass: C,
		narrowedBy: [...repeat(6, sixthPythagorean), ...repeat(5, 0)]
	}
};

/** Ids that {@link temperamentOffsets} knows, equal first. */
export const TEMPERAMENT_IDS: readonly string[] = Object.keys(CHAINS);

/** Display name of a temperament; null when the id is not known. */
export function temperamentName(id: string): string | null {
	return Object.hasOwn(CHAINS, id) ? CHAINS[id].name : null;
}

/**
 * Offsets of the twelve pitch classes (C first) from equal temperament, cents, with A = 0;
 * computed from the chain of fifths, never copied from a table. Null when the id is not known.
 */
export function temperamentOffsets(id: string): Cents[] | null {
	if (!Object.hasOwn(CHAINS, id)) return null;
	const chain = CHAINS[id];
	const offsets = new Array<Cents>(12).fill(0);
	let pitchClass = chain.startPitchClass;
	let offset = 0;
	for (const narrowed of chain.narrowedBy) {
		pitchClass = (pitchClass + 7) % 12;
		offset += PURE_FIFTH - 700 - narrowed;
		offsets[pitchClass] = offset;
	}
	const a = offsets[9];
	// Equal temperament is the reference itself: nothing may be left over from rounding.
	if (id === 'equal') return offsets.map(() => 0);
	return offsets.map((value) => value - a);
}

/** Offset of one note, cents above equal temperament, A = 0; null when the id is not known. */
export function temperamentOffsetCents(id: string, midi: Midi): Cents | null {
	const offsets = temperamentOffsets(id);
	return offsets === null ? null : offsets[((midi % 12) + 12) % 12];
}
