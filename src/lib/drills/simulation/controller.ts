import { normal, type Random } from '../../acoustics/random';
import { intervalBeatHz } from '../interval-score';
import type { IntervalTrialSpec, RawTrial, TrialSpec } from '../types';
import { unisonHeard, unisonPartial } from '../unison-score';
import { properSide } from '../words';
import { heardRateHz, type Hearing } from './ear';
import { Hand } from './hand';

/** A person at the drill: an ear, a hand, and how much care is taken. */
export interface Person {
	readonly hearing: Hearing;
	/** Spread of where the hand ends up against where it wanted to, cents. */
	readonly handCents: number;
	/** Chance of looking for both edges of the still stretch rather than stopping at the first. */
	readonly care: number;
	/** Chance of giving up early and leaving the string where it is. */
	readonly lapse: number;
	/** Chance of asking for the partial's pitch, and for a check, in a trial. */
	readonly asks: number;
}

/** Ear and hand without fault. */
export const PERFECT_PERSON: Person = {
	hearing: { thresholdHz: 0, weber: 0 },
	handCents: 0,
	care: 1,
	lapse: 0,
	asks: 0
};

/** Strikes after which anybody commits. */
const MOST_STRIKES = 60;

/**
 * Tunes one trial as a person would, who hears only how fast it beats, never which side it is on:
 * the string is really moved, and the trace is what was done.
 */
export function tune(spec: TrialSpec, person: Person, random: Random): RawTrial {
	const session = new Session(spec, person, random);
	if (random() < person.asks) session.hand.play('help', 2000);
	if (spec.drill === 'unison') tuneUnison(session);
	else tuneInterval(session, spec);
	return session.hand.commit();
}

/** Hand and ear on one trial. */
class Session {
	readonly hand: Hand;
	/** How many b/s one cent makes here; a person learns that by feel. */
	readonly hzPerCent: number;
	private readonly partial: number;
	private strikes = 0;

	constructor(
		private readonly spec: TrialSpec,
		readonly person: Person,
		readonly random: Random
	) {
		this.hand = new Hand(spec, random);
		this.partial = spec.drill === 'unison' ? unisonPartial(spec) : 0;
		this.hzPerCent = Math.abs(this.rateAt(20) - this.rateAt(10)) / 10;
	}

	/** Signed for an interval, never below 0 for a unison. */
	rateAt(cents: number): number {
		return this.spec.drill === 'unison'
			? unisonHeard(this.spec, cents, this.partial).rateHz
			: intervalBeatHz(this.spec as IntervalTrialSpec, cents);
	}

	get tired(): boolean {
		return this.strikes >= MOST_STRIKES || this.random() < this.person.lapse / 10;
	}

	listen(): number {
		this.strikes += 1;
		const rateHz = Math.abs(this.rateAt(this.hand.cents));
		// Slow beats take longer to hear.
		this.hand.strike(rateHz > 2 ? 900 : 2200);
		return heardRateHz(rateHz, this.person.hearing, this.random);
	}

	move(cents: number): void {
		this.hand.move(cents + this.person.handCents * normal(this.random));
	}

	moveTo(cents: number): void {
		this.move(cents - this.hand.cents);
	}
}

/** Finds the still stretch from one side and, with care, its other edge; ends in its middle. */
function tuneUnison(session: Session): void {
	const { hand, person, random } = session;
	let direction = random() < 0.5 ? -1 : 1;
	let before = session.listen();
	session.move(direction * 1);
	let now = session.listen();
	if (now > before) direction = -direction;
	while (now > 0 && !session.tired) {
		before = now;
		session.move(direction * Math.max(0.2, 0.8 * (now / session.hzPerCent)));
		now = session.listen();
		if (now > before) direction = -direction;
	}
	if (random() >= person.care) return;
	const entered = hand.cents;
	const edges = [entered];
	// On to the far edge, then back over the near one: the middle between them is the unison.
	for (const way of [direction, -direction]) {
		session.moveTo(entered);
		let beat = session.listen();
		for (let step = 0; step < 15 && beat === 0 && !session.tired; step += 1) {
			session.move(way * 0.25);
			beat = session.listen();
		}
		edges.push(hand.cents);
	}
	session.moveTo((Math.max(...edges) + Math.min(...edges)) / 2);
	session.listen();
}

/** Finds out on which side it is by moving, passes through beatless, opens to the target's rate. */
function tuneInterval(session: Session, spec: IntervalTrialSpec): void {
	const { person, random } = session;
	const widening = spec.moving === 'high' ? 1 : -1;
	const opening = properSide(spec) === 'wide' ? widening : -widening;
	session.hand.play('target', 3000);
	const wantedHz = heardRateHz(
		Math.abs(intervalBeatHz(spec, 0)),
		{ thresholdHz: 0, weber: person.hearing.weber },
		random
	);
	crossToProperSide(session, opening);
	for (let tries = 0; tries < 12 && !session.tired; tries += 1) {
		const now = session.listen();
		const missing = wantedHz - now;
		if (Math.abs(missing) <= Math.max(0.03, person.hearing.weber * 0.6) * wantedHz) break;
		session.move(opening * (missing / session.hzPerCent) * 0.9);
	}
	if (random() < person.asks) session.hand.play('check', 6000);
}

/** Opens a little: faster means the proper side; slower means beatless lies ahead, go on past it. */
function crossToProperSide(session: Session, opening: number): void {
	let before = session.listen();
	session.move(opening * 1);
	let now = session.listen();
	while (now <= before && !session.tired) {
		before = now;
		session.move(opening * Math.max(0.5, 0.6 * (now / session.hzPerCent)));
		now = session.listen();
	}
}
