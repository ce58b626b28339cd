import type { Midi } from './units';

/**
 * The numbers of an invented piano. Stiffness is two straight lines in log B, one for each bridge
 * (form: Rigaud, David & Daudet 2013, J. Acoust. Soc. Am. 133:3107), with a step where the wound
 * strings end. No real instrument is described.
 */
export interface PianoShape {
	id: string;
	name: string;
	kind: 'upright' | 'grand';
	bassSlope: number;
	bassIntercept: number;
	trebleSlope: number;
	trebleIntercept: number;
	/** Last note with wound strings. */
	breakMidi: Midi;
	/** Just above the break B is higher by this share… */
	riseAboveBreak: number;
	/** …and at the break lower by this share, both fading over four semitones. */
	dropAtBreak: number;
	/** Last note with one string, last note with two. */
	lastSingle: Midi;
	lastBichord: Midi;
	/** Where the hammer strikes, as a share of the speaking length, at A0 and at C8. */
	strikePoint: readonly [number, number];
	/** Below this frequency the soundboard radiates less and less, Hz. */
	radiationCornerHz: number;
	/** Brightness of the hammers against the medium grand's, a factor on the corner frequency. */
	brightness: number;
	/** A lone string's decay against the published table, a factor. */
	decayFactor: number;
	/** Share of a lone string's decay that goes through the bridge. */
	bridgeShare: number;
}

/** Three invented pianos; string counts are common practice (220 to 240 strings in all). */
export const PIANO_SHAPES: readonly PianoShape[] = [
	{
		id: 'short-upright',
		name: 'Short upright',
		kind: 'upright',
		bassSlope: -0.08395,
		bassIntercept: -5.65554,
		trebleSlope: 0.08949,
		trebleIntercept: -13.52897,
		breakMidi: 50,
		riseAboveBreak: 0.25,
		dropAtBreak: 0.15,
		lastSingle: 32,
		lastBichord: 50,
		strikePoint: [0.128, 0.09],
		radiationCornerHz: 110,
		brightness: 1.1,
		decayFactor: 1.15,
		bridgeShare: 0.72
	},
	{
		id: 'medium-grand',
		name: 'Medium grand',
		kind: 'grand',
		bassSlope: -0.08664,
		bassIntercept: -6.22768,
		trebleSlope: 0.08812,
		trebleIntercept: -13.49866,
		breakMidi: 46,
		riseAboveBreak: 0.15,
		dropAtBreak: 0.1,
		lastSingle: 30,
		lastBichord: 46,
		strikePoint: [0.123, 0.08],
		radiationCornerHz: 90,
		brightness: 1,
		decayFactor: 1,
		bridgeShare: 0.7
	},
	{
		id: 'long-grand',
		name: 'Long grand',
		kind: 'grand',
		bassSlope: -0.08157,
		bassIntercept: -6.96669,
		trebleSlope: 0.08729,
		trebleIntercept: -13.54687,
		breakMidi: 40,
		riseAboveBreak: 0.1,
		dropAtBreak: 0.05,
		lastSingle: 28,
		lastBichord: 40,
		strikePoint: [0.118, 0.07],
		radiationCornerHz: 70,
		brightness: 1.05,
		decayFactor: 0.92,
		bridgeShare: 0.68
	}
];

/** The stiffness part of a shape, all that {@link shapeInharmonicity} needs. */
export type StiffnessShape = Pick<
	PianoShape,
	| 'bassSlope'
	| 'bassIntercept'
	| 'trebleSlope'
	| 'trebleIntercept'
	| 'breakMidi'
	| 'riseAboveBreak'
	| 'dropAtBreak'
>;

/** B of a note of a shape: exp(bass line) + exp(treble line), times the step at the break. */
export function shapeInharmonicity(shape: StiffnessShape, midi: Midi): number {
	const smooth =
		Math.exp(shape.bassSlope * midi + shape.bassIntercept) +
		Math.exp(shape.trebleSlope * midi + shape.trebleIntercept);
	const above = midi - shape.breakMidi;
	return above > 0
		? smooth * (1 + shape.riseAboveBreak * Math.exp(-(above - 1) / 4))
		: smooth * (1 - shape.dropAtBreak * Math.exp(above / 4));
}

/** Strings of a note of a shape. */
export function shapeStringCount(
	shape: Pick<PianoShape, 'lastSingle' | 'lastBichord'>,
	midi: Midi
): 1 | 2 | 3 {
	if (midi <= shape.lastSingle) return 1;
	return midi <= shape.lastBichord ? 2 : 3;
}
