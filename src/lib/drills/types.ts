/**
 * The shapes that a drill passes between browser, server and command line.
 *
 * A stimulus (`BlockSpec`) holds only text, whole numbers and hundredths of a cent, so that a block
 * drawn again from its seed compares equal on every machine. What follows from it by calculation
 * (target beats, the loudest partial, tolerances) is derived when needed, never sent.
 */
import type { DrillInterval, PianoId, ToleranceSetId } from './catalogue';

export type { DrillInterval, PianoId, ToleranceSetId };

export type DrillId = 'unison' | 'interval' | 'odd-one';
/** Drills whose attempts are stored and scored by the server. */
export type ScoredDrillId = 'unison' | 'interval';

/** The rules by which new blocks are drawn and scored. Old attempts keep the version they were made with. */
export const ENGINE_VERSION = 1;

/** Trials in a block. */
export const BLOCK_TRIALS = 10;
/** The finest move of the string, in cents. Every move is a whole number of these. */
export const GRID_CENTS = 0.05;
/** One press of an arrow key without shift, in cents. */
export const COARSE_STEP_CENTS = 0.5;
/** One press of page up or page down, in cents. */
export const PAGE_STEP_CENTS = 5;
/** The string stops this far from the target on either side, in cents. */
export const RANGE_CENTS = 60;

export interface BlockOptions {
	readonly toleranceSet: ToleranceSetId;
	/** One piano for the whole block, or another for each trial. */
	readonly piano: PianoId | 'varied';
	/** Interval drill only: the intervals that may come; at least one. */
	readonly intervals?: readonly DrillInterval[];
}

interface TrialSpecBase {
	readonly index: number;
	readonly piano: PianoId;
	/** Strength of the blow, hundredths of full strength (1 to 100). */
	readonly velocityPercent: number;
	/** Where the moving string starts: cents of its f_1 above the target (negative: below). */
	readonly startCents: number;
	readonly toleranceSet: ToleranceSetId;
}

/** Two strings of one note; the first is at the piano's target, the second is moved to it. */
export interface UnisonTrialSpec extends TrialSpecBase {
	readonly drill: 'unison';
	readonly midi: number;
}

/** One string of each of two notes; the fixed note is at the piano's target. */
export interface IntervalTrialSpec extends TrialSpecBase {
	readonly drill: 'interval';
	readonly interval: DrillInterval;
	readonly lowMidi: number;
	readonly highMidi: number;
	readonly moving: 'low' | 'high';
}

export type TrialSpec = UnisonTrialSpec | IntervalTrialSpec;

export interface BlockSpec {
	readonly drill: ScoredDrillId;
	readonly engineVersion: number;
	/** 0 to 2^32 - 1. */
	readonly seed: number;
	readonly options: BlockOptions;
	readonly trials: readonly TrialSpec[];
}

/** A listening trial: three tones of one note, one of which beats. Not stored on the server. */
export interface OddOneTrialSpec {
	readonly drill: 'odd-one';
	readonly piano: PianoId;
	readonly midi: number;
	readonly velocityPercent: number;
	/** Cents between the two strings of the tone that beats. */
	readonly spreadCents: number;
	/** Which of the three tones beats: 0, 1 or 2. */
	readonly answer: 0 | 1 | 2;
}

/**
 * What happened in a trial, in order.
 * move: the string was moved, to `cents`. strike: everything struck. fixed, moving: that string
 * alone struck. help: the coincident partial's pitch played alone. check: the check note played.
 * target: the target beat played at the coincident partial's pitch.
 */
export const TRACE_KINDS = [
	'move',
	'strike',
	'fixed',
	'moving',
	'help',
	'check',
	'target'
] as const;
export type TraceKind = (typeof TRACE_KINDS)[number];

/** [whole milliseconds since the trial began, what, where the moving string then was in cents]. */
export type TraceEvent = readonly [tMs: number, kind: TraceKind, cents: number];

export interface RawTrial {
	readonly index: number;
	readonly startCents: number;
	readonly trace: readonly TraceEvent[];
	/** Where the string was left: equals the last trace value. */
	readonly committedCents: number;
	/** Whole milliseconds from the trial's beginning to the commit. */
	readonly committedAtMs: number;
}

interface TrialResultBase {
	readonly index: number;
	/** Cents of the moving string's f_1 above where it belongs (negative: below). */
	readonly errorCents: number;
	/** Beats per second at the judged partial; 0 when there is no beat. */
	readonly rateHeardHz: number;
	readonly toleranceCents: number;
	readonly inside: boolean;
	readonly strikes: number;
	readonly helps: number;
	readonly checks: number;
	readonly seconds: number;
}

export interface UnisonTrialResult extends TrialResultBase {
	readonly drill: 'unison';
	/** The strings are coupled into one frequency at the judged partial. */
	readonly locked: boolean;
	/** The loudest coincident partial, where the rate is told. */
	readonly partial: number;
	readonly partialHz: number;
}

export interface IntervalTrialResult extends TrialResultBase {
	readonly drill: 'interval';
	/** f_high(q) - f_low(p) in Hz, wide > 0. */
	readonly signedBeatHz: number;
	readonly targetSignedHz: number;
	/** |beat| - |target| in Hz, whatever the side. */
	readonly rateErrorHz: number;
	readonly side: 'right' | 'wrong' | 'none';
	/** As fast as the target within the tolerance, but narrow instead of wide or wide instead of narrow. */
	readonly rightRateWrongSide: boolean;
	/** Signed beat rates that count as inside, low to high; never reaches over beatless. */
	readonly toleranceHz: readonly [number, number];
	readonly lowerPartial: number;
	readonly upperPartial: number;
	readonly partialHz: number;
}

export type TrialResult = UnisonTrialResult | IntervalTrialResult;

export interface BlockResult {
	readonly drill: ScoredDrillId;
	readonly engineVersion: number;
	/** The median of |error| in cents; smaller is better. */
	readonly score: number;
	readonly medianAbsErrorCents: number;
	/** Trials inside the tolerance, of `count`. */
	readonly inside: number;
	readonly count: number;
	/** Median signed error in cents: leaning sharp (> 0) or flat (< 0). */
	readonly medianSignedCents: number;
	readonly helps: number;
	readonly checks: number;
	/** Interval drill: trials with the right rate on the wrong side; 0 for unisons. */
	readonly rightRateWrongSide: number;
	readonly trials: readonly TrialResult[];
}

export interface DeviceFacts {
	readonly sampleRateHz: number;
	/** Null where the browser does not tell. */
	readonly outputLatencySeconds: number | null;
	/** Kind of machine and browser family only, e.g. `desktop-chromium`; never the whole header. */
	readonly userAgentClass: string;
}

export interface AttemptSubmission {
	/** Made by the client, so that sending twice stores once. */
	readonly id: string;
	readonly drill: ScoredDrillId;
	readonly engineVersion: number;
	readonly seed: number;
	readonly stimulus: BlockSpec;
	readonly trials: readonly RawTrial[];
	readonly device: DeviceFacts;
	readonly clientScore: number;
	/** ISO 8601, UTC. */
	readonly startedAt: string;
	readonly finishedAt: string;
}

export type SubmissionCheck =
	| { readonly ok: true; readonly submission: AttemptSubmission; readonly result: BlockResult }
	| { readonly ok: false; readonly reason: string };
