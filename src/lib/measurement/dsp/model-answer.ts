import type { BandSignal } from './band';
import {
	bandAnswer,
	REASONS,
	wholeWindow,
	type BandAnswer,
	type BandQuestion
} from './band-answer';
import { audibleComponents, visibleSeconds, type SplitWindow } from './clusters';
import { chooseOrder, fitNextOrder, refitFrom, type OrderFit, type OrderLimits } from './orders';
import { intervalRate, unisonRate, type RuledRate, type Unruled } from './rate-rule';
import { fisherSd, modelHalfWidth } from './rate-width';
import type { Component } from './refine';
import { beating, notMeasurable, still, type BandVerdict } from './verdict';

const INTERVAL_WINDOW = [0.2, 2.7] as const;
const UNISON_LIMITS: OrderLimits = { maxOrder: 7, gainDb: 2, enoughDb: -30 };
const INTERVAL_LIMITS: OrderLimits = { maxOrder: 7, gainDb: 1.2, enoughDb: -36 };
const HOPELESS_DB = -12;

/** Answer for a richer sound: orders up to 7, groups of components, width from variants. */
export function modelAnswer(
	band: BandSignal,
	fits: OrderFit[],
	question: BandQuestion
): BandAnswer {
	const interval = question.kind === 'interval';
	const chosen = chooseOrder(band, fits, interval ? INTERVAL_LIMITS : UNISON_LIMITS);
	const window = windowOf(band, question, chosen);
	const heard = audibleComponents(chosen.fit.components, window, -26, band.passHz + 2);
	const done = (main: BandVerdict, others: BandVerdict[] = []): BandAnswer =>
		bandAnswer(main, others, question, band, heard, window);
	if (chosen.residualDb > HOPELESS_DB) return done(notMeasurable(REASONS.several));
	const ruled = ruledRate(band, chosen, question);
	if (ruled === 'masked') return done(notMeasurable(REASONS.swell));
	if (ruled === 'unclear') return done(notMeasurable(REASONS.several));
	if (!ruled) {
		if (interval) return done(notMeasurable(REASONS.oneByOne));
		return done(stillOrNoisy(heard, chosen, window));
	}
	if (ruled.split.cycles < fewestCycles(band, question)) {
		return done(notMeasurable(REASONS.fewBeats));
	}
	const variants = variantRates(band, fits, chosen, question);
	const near = variants.filter((rate) => rate !== null && agrees(rate, ruled)) as number[];
	if (near.length < variants.length / 2) return done(notMeasurable(REASONS.several));
	const half = modelHalfWidth({
		ruled,
		fisherSdHz: fisherSd(chosen, ruled.split.low, ruled.split.high),
		rivalRatesHz: ruled.rivals.map(({ rateHz }) => rateHz),
		variantRatesHz: near,
		seconds: (window.to - window.from) / band.rateHz
	});
	return done(beating(ruled.split.rateHz, half, null, REASONS.several));
}

const MIN_CYCLES = 1.5;
/** Shorter than this, a string's own components (0.1 to 0.4 Hz apart) run into one. */
const PARTING_SECONDS = 6;

/** Cycles that must be seen before a rate is believed: more in a short window. */
function fewestCycles(band: BandSignal, { kind }: BandQuestion): number {
	const seconds = band.z.length / 2 / band.rateHz;
	return kind === 'interval' ? MIN_CYCLES : MIN_CYCLES * Math.max(1, PARTING_SECONDS / seconds);
}

/** A second component 20 dB below the first makes a beat that can be heard. */
const SECOND_SHARE = 0.01;
const OVER_NOISE = 20;

/** `still`, limited to 1.5 cycles in the time heard; not where noise could hide a second string. */
function stillOrNoisy(heard: Component[], order: OrderFit, window: SplitWindow): BandVerdict {
	const strongest = Math.max(...heard.map(({ energy }) => energy));
	const hidden = SECOND_SHARE * strongest < OVER_NOISE * order.rest.variance;
	if (hidden) return notMeasurable(REASONS.noisy);
	return still(MIN_CYCLES / visibleSeconds(heard, window));
}

function windowOf(band: BandSignal, question: BandQuestion, order?: OrderFit): SplitWindow {
	const whole = wholeWindow(band, order);
	if (question.kind === 'unison') return whole;
	const offset = band.startSeconds - question.strikeSeconds;
	const from = Math.max(0, Math.round((INTERVAL_WINDOW[0] - offset) * band.rateHz));
	const to = Math.min(whole.to, Math.round((INTERVAL_WINDOW[1] - offset) * band.rateHz));
	return to - from > 16 ? { ...whole, from, to } : whole;
}

function ruledRate(
	band: BandSignal,
	fit: OrderFit,
	question: BandQuestion
): RuledRate | Unruled | null {
	const window = windowOf(band, question, fit);
	const maxHz = band.passHz + 2;
	if (question.kind === 'unison') return unisonRate(fit, window, maxHz);
	const shifted = question.expected && {
		...question.expected,
		lowHz: question.expected.lowHz + question.centreHz - band.centreHz,
		highHz: question.expected.highHz + question.centreHz - band.centreHz
	};
	return intervalRate(fit, window, maxHz, shifted);
}

function rateOf(ruled: RuledRate | Unruled | null): number | null {
	return ruled === null || typeof ruled === 'string' ? null : ruled.split.rateHz;
}

function agrees(rate: number, ruled: RuledRate): boolean {
	return Math.abs(rate - ruled.split.rateHz) <= Math.max(0.15, 0.12 * ruled.split.rateHz);
}

/** The same question put to other orders and other windows. */
function variantRates(
	band: BandSignal,
	fits: OrderFit[],
	chosen: OrderFit,
	question: BandQuestion
): (number | null)[] {
	const rates: (number | null)[] = [];
	for (const order of [chosen.order - 1, chosen.order + 1, chosen.order + 2]) {
		const fit = order < 2 ? null : fitOfOrder(band, fits, order);
		if (fit) rates.push(rateOf(ruledRate(band, fit, question)));
	}
	const skip = Math.round(0.15 * band.rateHz);
	const samples = band.z.length / 2;
	const late = partOf(band, skip, samples);
	const early = partOf(band, 0, Math.round(0.75 * samples));
	for (const cut of [late, early]) {
		const fit = refitFrom(cut, chosen.fit.components);
		if (fit) rates.push(rateOf(ruledRate(cut, fit, question)));
	}
	return rates;
}

function fitOfOrder(band: BandSignal, fits: OrderFit[], order: number): OrderFit | null {
	while (fits.length < order) {
		const next = fitNextOrder(band, fits[fits.length - 1]);
		if (!next) return null;
		fits.push(next);
	}
	return fits[order - 1];
}

function partOf(band: BandSignal, from: number, to: number): BandSignal {
	return {
		...band,
		z: band.z.slice(2 * from, 2 * to),
		startSeconds: band.startSeconds + from / band.rateHz
	};
}
