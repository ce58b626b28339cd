import { allPairs, allSplits, audibleComponents, type Split, type SplitWindow } from './clusters';
import type { OrderFit } from './orders';

/** Where an interval's two notes are expected within the band, hertz re the band's centre. */
export interface ExpectedPlaces {
	lowHz: number;
	highHz: number;
	/** Uncertainty of their distance in hertz. */
	sigmaHz: number;
}

/** A rate by the cluster rules, before its width is known. */
export interface RuledRate {
	split: Split;
	/** How the groups were found. */
	by: 'clusters' | 'pair';
	/** Other rates that can be heard beside it, strongest first. */
	others: Split[];
	/** Those heard about as well as the answer: they make it irregular. */
	rivals: Split[];
}

/** Why there is no rate although the sound is not still. */
export type Unruled = 'masked' | 'unclear';

const MIN_SEPARATION = 2.5;
/** The depth of a component 20 dB below the other: what is left out as inaudible. */
const MIN_DEPTH = 0.2;
const RIVAL_SHARE = 0.6;
/** A group this wide, re the rate, that turns this often is more than one string. */
const WIDE_GROUP = 0.3;
const MANY_CYCLES = 5;
/** A ripple this deep that completes a cycle forbids to call the sound still. */
const UNCLEAR_DEPTH = 0.1;
const MIN_CYCLES = 1.5;
const AUDIBLE_DB = -20;

/**
 * One string group sounding alone: the split of its components into two clear groups with the
 * largest separation times depth; else the strongest pair that completes a cycle visibly.
 * @returns null when nothing completes a cycle, `masked` when a swell too slow to complete one
 * is much deeper than anything that does, `unclear` when only a shallow ripple completes one
 */
export function unisonRate(
	fit: OrderFit,
	window: SplitWindow,
	maxHz: number
): RuledRate | Unruled | null {
	const parts = audibleComponents(fit.fit.components, window, AUDIBLE_DB, maxHz);
	const qualifying = allSplits(parts, window).filter(
		({ separation, depth, cycles }) =>
			separation >= MIN_SEPARATION && depth >= MIN_DEPTH && cycles >= MIN_CYCLES
	);
	const every = allPairs(parts, window).sort((a, b) => b.depth - a.depth);
	const pairs = every.filter(({ depth, cycles }) => depth >= MIN_DEPTH && cycles >= 1);
	const enough = (depth: number): boolean => depth >= RIVAL_SHARE * (every[0]?.depth ?? 0);
	const split = qualifying.reduce<Split | null>(
		(a, b) => (a && a.separation * a.depth >= b.separation * b.depth ? a : b),
		null
	);
	// A pair that beats more deeply inside one group than the groups do is what is heard.
	if (split && (pairs.length === 0 || pairs[0].depth <= split.depth)) {
		const worth = (other: Split): number => other.separation * other.depth;
		if (!enough(split.depth)) return 'masked';
		if (moreThanTwo(split, window)) return 'unclear';
		return {
			split,
			by: 'clusters',
			others: pairs.filter((pair) => !within(pair, split)),
			rivals: qualifying.filter((other) => worth(other) >= RIVAL_SHARE * worth(split))
		};
	}
	if (pairs.length === 0) {
		const unclear = every.some(({ depth, cycles }) => depth >= UNCLEAR_DEPTH && cycles >= 1);
		return unclear ? 'unclear' : null;
	}
	if (!enough(pairs[0].depth)) return 'masked';
	const rivals = pairs.filter(({ depth }) => depth >= RIVAL_SHARE * pairs[0].depth);
	return { split: pairs[0], by: 'pair', others: pairs.slice(1), rivals };
}

/** Whether a group is itself two strings that beat against each other, rather than one string. */
function moreThanTwo(split: Split, window: SplitWindow): boolean {
	const spread = 2 * Math.max(split.lowSpreadHz, split.highSpreadHz);
	const cycles = (spread * (window.to - window.from)) / window.rateHz;
	return spread > WIDE_GROUP * split.rateHz && cycles > MANY_CYCLES;
}

/** Whether a pair's rate is that of the split, give or take the groups' widths. */
function within(pair: Split, split: Split): boolean {
	const width = split.lowSpreadHz + split.highSpreadHz + 0.1 + 0.05 * split.rateHz;
	return Math.abs(pair.rateHz - split.rateHz) <= 2 * width;
}

const INTERVAL_AUDIBLE_DB = -30;
const INTERVAL_DEPTH = 0.05;

/**
 * Two notes: the split whose groups lie nearest to where the notes' own partials say they are.
 * @returns null when no split fits the expectation
 */
export function intervalRate(
	fit: OrderFit,
	window: SplitWindow,
	maxHz: number,
	expected: ExpectedPlaces | null
): RuledRate | null {
	const parts = audibleComponents(fit.fit.components, window, INTERVAL_AUDIBLE_DB, maxHz);
	const splits = allSplits(parts, window).filter(
		({ depth, separation, cycles }) =>
			depth >= INTERVAL_DEPTH && separation >= 1.2 && cycles >= MIN_CYCLES
	);
	let best: Split | null = null;
	let bestScore = 0;
	for (const split of splits) {
		if (!plausible(split, expected)) continue;
		const score = split.separation * split.depth * nearness(split, expected);
		if (score > bestScore) {
			best = split;
			bestScore = score;
		}
	}
	return best && { split: best, by: 'clusters', others: [], rivals: [] };
}

function nearness(split: Split, expected: ExpectedPlaces | null): number {
	if (!expected) return 1;
	const [a, b] = [expected.lowHz, expected.highHz].sort((x, y) => x - y);
	const distance = Math.hypot(split.lowHz - a, split.highHz - b);
	return 1 / (1 + (distance / expected.sigmaHz) ** 2);
}

function plausible(split: Split, expected: ExpectedPlaces | null): boolean {
	if (!expected) return split.separation >= 4;
	if (!nearExpected(split.rateHz, expected)) return false;
	return split.rateHz > 3 || split.separation >= 4;
}

/** Whether a rate is what the notes' own partials lead one to expect. */
export function nearExpected(rateHz: number, expected: ExpectedPlaces): boolean {
	const wanted = Math.abs(expected.highHz - expected.lowHz);
	const error = Math.abs(rateHz - wanted);
	return error <= (rateHz > 3 ? Math.max(2.5, 0.2 * wanted) : 0.5);
}
