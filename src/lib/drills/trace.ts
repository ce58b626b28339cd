import { isReachable } from './grid';
import type { RawTrial, TraceKind, TrialSpec } from './types';

/** Events in one trial's trace; a hand that never stops makes about 12 a second. */
export const MAX_TRACE_EVENTS = 4000;
/** A trial left open longer than this is not one trial. */
export const MAX_TRIAL_MS = 60 * 60 * 1000;
/** Farther than any one move of key, button or handle reaches. */
export const MAX_MOVE_CENTS = 40;

/** How often something was done in a trial. */
export function countEvents(raw: RawTrial, ...kinds: TraceKind[]): number {
	return raw.trace.filter(([, kind]) => kinds.includes(kind)).length;
}

/**
 * Why this trial cannot have happened as told, in one sentence; null when it can.
 * Numbers must lie on the string's grid, time must run forward, nothing but a move may change the
 * string, and what was committed must be where the trace ends.
 */
export function traceFault(spec: TrialSpec, raw: RawTrial): string | null {
	const where = `Trial ${spec.index + 1}`;
	if (raw.index !== spec.index) return `${where} is out of order.`;
	if (raw.startCents !== spec.startCents)
		return `${where} starts elsewhere than its stimulus says.`;
	const fault = eventsFault(spec, raw);
	if (fault) return `${where}: ${fault}`;
	const last = raw.trace.at(-1);
	const end = last ? last[2] : spec.startCents;
	if (raw.committedCents !== end) return `${where} commits a string that is not where it was left.`;
	if (raw.committedAtMs < (last ? last[0] : 0))
		return `${where} was committed before its last event.`;
	if (raw.committedAtMs > MAX_TRIAL_MS) return `${where} lasted longer than an hour.`;
	if (countEvents(raw, 'strike') === 0) return `${where} was committed without one strike.`;
	return null;
}

function eventsFault(spec: TrialSpec, raw: RawTrial): string | null {
	let timeMs = 0;
	let cents = spec.startCents;
	for (const [tMs, kind, next] of raw.trace) {
		if (tMs < timeMs) return 'time runs backwards in the trace.';
		if (!isReachable(spec.startCents, next)) return 'the string stands where no move can put it.';
		if (kind !== 'move' && next !== cents) return 'the string moved without a move.';
		if (Math.abs(next - cents) > MAX_MOVE_CENTS) return 'one move is larger than the lever allows.';
		if (kind === 'check' && spec.drill === 'unison') return 'a unison has no check note.';
		if (kind === 'target' && spec.drill === 'unison') return 'a unison has no target beat.';
		timeMs = tMs;
		cents = next;
	}
	return null;
}
