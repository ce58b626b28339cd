/**
 * What a measurement of a struck string says. The same shape is printed by `npm run measure`,
 * shown by the string check and stored with it.
 */

/** What the person says was struck. */
export type MeasureKind = 'note' | 'unison' | 'interval';

/** `beating`: a rate is given; `still`: no pair completes a cycle; `not-measurable`: see `reason`. */
export type PairVerdict = 'beating' | 'still' | 'not-measurable';

/** How sure a rate is: `firm` is within max(5 %, 0.1 b/s), `about` within max(10 %, 0.15 b/s). */
export type PairTier = 'firm' | 'about';

/** A 95 % interval, lower end first. */
export type Interval95 = [low: number, high: number];

export interface NoteMeasure {
	/** Name with sharps, for example `C#4`. */
	note: string;
	/** Frequency of the sounding first partial in hertz; null when it was not found. */
	f1Hz: number | null;
	f1Ci95Hz: Interval95 | null;
	/** B of f_n = n·f0·sqrt(1 + B·n²), dimensionless; null when it was not found. */
	inharmonicity: number | null;
	inharmonicityCi95: Interval95 | null;
	/** Distance of f1 from equal temperament on A4 = 440 Hz, in cents. */
	centsFromEqual: number | null;
}

export interface PairMeasure {
	/** Partial number of the lower note (of the one note for a unison). */
	lowerPartial: number;
	/** Partial number of the upper note (equal to `lowerPartial` for a unison). */
	upperPartial: number;
	/** Where the pair meets, in hertz. */
	frequencyHz: number;
	verdict: PairVerdict;
	tier: PairTier | null;
	/** Unsigned beats per second; null unless `beating`. */
	beatRateHz: number | null;
	ci95Hz: Interval95 | null;
	/** The part of the clip that was used, in seconds from the strike. */
	windowSeconds: [from: number, to: number];
	/** For `not-measurable` why; for `still` its limit in words; else null or a remark. */
	reason: string | null;
}

export interface MeasureResult {
	notes: NoteMeasure[];
	pairs: PairMeasure[];
	/** Sentences for the person: what is missing and what to do about it. */
	advice: string[];
}

export interface MeasureOptions {
	kind: MeasureKind;
	/**
	 * MIDI numbers: one for `unison`, two (low, high) for `interval`, one or none for `note`
	 * (detected when left out).
	 */
	notes?: readonly number[];
	/** Length used from the strike on, in seconds; the whole clip up to 8 s when left out. */
	seconds?: number;
}

/** Level of one frequency band over time. */
export interface ShorelineTrace {
	/** Seconds from the start of the samples. */
	timesS: Float32Array;
	/** Level in dB relative to a full-scale sine, never below -120. */
	levelDb: Float32Array;
}

export interface ShorelineOptions {
	/** Half width of the band in hertz; default 20. */
	halfWidthHz?: number;
	/** Distance of two values in seconds; default 0.02. */
	stepSeconds?: number;
}
