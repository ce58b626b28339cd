import type { BandSignal } from './band';
import {
	bandAnswer,
	REASONS,
	wholeWindow,
	type BandAnswer,
	type BandQuestion
} from './band-answer';
import { audibleComponents, describeSplit, visibleSeconds, type SplitWindow } from './clusters';
import { fitNextOrder, type OrderFit } from './orders';
import { nearExpected } from './rate-rule';
import { fisherSd, FLOOR_HZ, studentQuantile95 } from './rate-width';
import type { Component } from './refine';
import { whitePeakLimit } from './residual';
import { beating, notMeasurable, still, type BandVerdict } from './verdict';

/** A residual this low is no model error worth the name, white or not. */
const CLEAN_DB = -48;

/**
 * The order at which the rest is noise alone, if that happens within `maxOrder` components:
 * no further component gains more than 4·ln(2N) + 4 of twice the log-likelihood.
 */
export function cleanOrder(band: BandSignal, fits: OrderFit[], maxOrder: number): OrderFit | null {
	const samples = band.z.length / 2;
	const limit = whitePeakLimit(samples, band.rateHz, band.passHz);
	for (let order = 1; order <= maxOrder; order++) {
		if (fits.length < order) {
			const next = fitNextOrder(band, fits[fits.length - 1] ?? null);
			if (!next) return null;
			fits.push(next);
		}
		const fit = fits[order - 1];
		if (fit.residualDb < CLEAN_DB) return fit;
		if (fit.rest.peakOverMean > limit) continue;
		if (fits.length === order) {
			const next = fitNextOrder(band, fit);
			if (next) fits.push(next);
		}
		const next = fits[order];
		if (!next) return fit;
		const variance = next.rest.variance || 1e-30;
		const gain = (2 * (fit.fit.residualEnergy - next.fit.residualEnergy)) / variance;
		if (gain < 4 * Math.log(2 * samples) + 4) return fit;
	}
	return null;
}

/** A component's energy over that of the noise's lines around it (13 dB). */
const OVER_NOISE = 20;

/** One, two (or three) damped components and noise, as they are judged. */
interface CleanBand {
	order: OrderFit;
	heard: Component[];
	window: SplitWindow;
	seconds: number;
	passHz: number;
	question: BandQuestion;
}

/** Answer where one, two (or three) damped components and noise are the whole story. */
export function cleanAnswer(band: BandSignal, order: OrderFit, question: BandQuestion): BandAnswer {
	const window = wholeWindow(band, order);
	const seconds = band.z.length / 2 / band.rateHz;
	const { passHz } = band;
	const heard = audibleComponents(order.fit.components, window, -26, passHz + 2).filter(
		({ energy, hz }) => energy > OVER_NOISE * order.rest.varianceNear(hz)
	);
	const clean = { order, heard, window, seconds, passHz, question };
	const done = (main: BandVerdict, others: BandVerdict[] = []): BandAnswer =>
		bandAnswer(main, others, question, band, heard);
	if (heard.length === 0) return done(notMeasurable(REASONS.tooWeak));
	if (heard.length === 1) {
		const one = question.kind === 'unison' ? stillOrNoisy(clean, 0) : null;
		return done(one ?? notMeasurable(REASONS.oneByOne));
	}
	const [main, ...others] = pairVerdicts(clean);
	return done(
		main,
		others.filter(({ verdict }) => verdict === 'beating')
	);
}

interface JudgedPair {
	verdict: BandVerdict;
	strength: number;
}

/** The verdicts on all pairs of components: those that beat first, the strongest pair first. */
function pairVerdicts(clean: CleanBand): BandVerdict[] {
	const { heard } = clean;
	const found: JudgedPair[] = [];
	for (let i = 0; i < heard.length; i++) {
		for (let j = i + 1; j < heard.length; j++) {
			const strength = Math.sqrt(heard[i].energy * heard[j].energy);
			found.push({ verdict: pairVerdict(clean, heard[i], heard[j]), strength });
		}
	}
	const strongest = Math.max(...found.map(({ strength }) => strength));
	// Where any pair beats the sound is not still, so beating pairs come first.
	const rank = ({ verdict, strength }: JudgedPair): number =>
		verdict.verdict === 'beating' && (isProven(clean) || strength > DEEP_SHARE * strongest) ? 0 : 1;
	found.sort((a, b) => rank(a) - rank(b) || b.strength - a.strength);
	const [first] = found;
	if (rank(first) === 1 && found.some(({ verdict }) => verdict.verdict === 'beating')) {
		return [notMeasurable(REASONS.swell)];
	}
	return found.map(({ verdict }) => verdict);
}

/** A pair this much shallower than the deepest is covered by it. */
const DEEP_SHARE = 0.6;

function pairVerdict(clean: CleanBand, a: Component, b: Component): BandVerdict {
	const { order, seconds, passHz, question } = clean;
	const freedom = Math.max(3, 2 * passHz * seconds - 4 * order.order);
	const rate = Math.abs(b.hz - a.hz);
	const half = Math.hypot(
		studentQuantile95(freedom) * fisherSd(order, [a], [b]),
		order.order > 2 ? (rate * seconds < 2 ? 0.4 : 0.06) / seconds : 0,
		FLOOR_HZ
	);
	const fading = Math.abs(b.decayPerSecond - a.decayPerSecond);
	// One is gone before a beat is complete: locked strings, or as good as locked.
	const locked = 2 * Math.PI * rate <= fading;
	const { expected, kind } = question;
	// Two components of one note are not the interval's beat.
	if (expected && !nearExpected(rate, expected)) return notMeasurable(REASONS.oneByOne);
	if (locked || rate < Math.max(smallestSeen(clean), 1.5 * half)) {
		if (kind === 'interval') return notMeasurable(REASONS.oneByOne);
		return half <= 0.15 ? stillOrNoisy(clean, rate + half) : notMeasurable(REASONS.uncertain);
	}
	return enoughHeard(clean, a, b, rate, half) ?? beating(rate, half, null, REASONS.uncertain);
}

/** Below this a fit is proven to be the sound itself: less than a beat tells the rate. */
const PROVEN_DB = -36;
const MIN_CYCLES = 1.5;
/** Shorter than this, the components that noise hides may pass for one. */
const PARTING_SECONDS = 5;
/** Energy of a three-string pair's weaker component over that of all noise. */
const PARTED = 4;

function isProven({ order }: CleanBand): boolean {
	return order.residualDb < PROVEN_DB;
}

/**
 * Why a rate is not to be trusted although the fit is as good as the noise lets one see: a real
 * string's partial is several components, and the noise may hide that. Null when it is.
 */
function enoughHeard(
	clean: CleanBand,
	a: Component,
	b: Component,
	rate: number,
	half: number
): BandVerdict | null {
	if (isProven(clean)) return null;
	const { order, window, seconds } = clean;
	const weaker = Math.min(a.energy, b.energy);
	if (order.order > 2 && weaker < PARTED * order.fit.residualEnergy) {
		return notMeasurable(REASONS.noisy);
	}
	const { cycles } = describeSplit([a], [b], window);
	const fewest = MIN_CYCLES * Math.max(1, PARTING_SECONDS / seconds);
	return cycles * (1 - half / rate) < fewest ? notMeasurable(REASONS.fewBeats) : null;
}

/** A second component this far below the first makes a beat that can be heard: 20 dB. */
const SECOND_SHARE = 0.01;

/**
 * `still` with its limit: 1.5 cycles in the time heard, or, where the fit is proven, the smallest
 * beat that would have been seen. Not where noise could hide a second string.
 */
function stillOrNoisy(clean: CleanBand, atLeastHz: number): BandVerdict {
	const { order, heard, window } = clean;
	const strongest = Math.max(...heard.map(({ energy }) => energy));
	if (SECOND_SHARE * strongest < OVER_NOISE * order.rest.variance) {
		return notMeasurable(REASONS.noisy);
	}
	const sure = isProven(clean) && heard.length === 1;
	const limit = sure ? smallestSeen(clean) : MIN_CYCLES / visibleSeconds(heard, window);
	return still(Math.max(limit, atLeastHz));
}

/** The smallest beat that would have been seen: 0.15, 0.1, 0.05 b/s after 1, 2, 4 s at 20 dB. */
function smallestSeen({ order, seconds }: CleanBand): number {
	const strongest = Math.max(...order.fit.components.map((part) => part.energy));
	const snrDb = 10 * Math.log10(strongest / (order.fit.residualEnergy + 1e-300));
	const weak = snrDb < 20 ? 10 ** ((20 - snrDb) / 20) : 1;
	return (weak * 0.2) / Math.max(0.5, seconds);
}
