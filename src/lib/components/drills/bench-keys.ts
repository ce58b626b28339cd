import { COARSE_STEP_CENTS, PAGE_STEP_CENTS } from '../../drills/types';
import { stepsOfMove } from '../../drills/grid';

/** What a key at the bench asks for. */
export type BenchAct =
	| { readonly kind: 'move'; readonly steps: number }
	| { readonly kind: 'strike' | 'fixed' | 'moving' | 'help' | 'check' | 'target' | 'commit' };

export interface BenchKey {
	readonly key: string;
	readonly shiftKey: boolean;
	readonly altKey: boolean;
	readonly ctrlKey: boolean;
	readonly metaKey: boolean;
	readonly repeat: boolean;
}

const LETTERS: Readonly<Record<string, 'fixed' | 'moving' | 'help' | 'check' | 'target'>> = {
	'1': 'fixed',
	'2': 'moving',
	h: 'help',
	c: 'check',
	t: 'target'
};

/**
 * The act of a key, or null when the bench leaves the key to the browser.
 * @param onControl the focus is on a button, link or field inside the bench: Space and Enter are its own
 * @param lettersOn single-character keys may be switched off (WCAG 2.1.4)
 */
export function benchAct(event: BenchKey, onControl: boolean, lettersOn: boolean): BenchAct | null {
	if (event.altKey || event.ctrlKey || event.metaKey) return null;
	const way = { ArrowLeft: -1, ArrowRight: 1, PageDown: -1, PageUp: 1 }[event.key];
	if (way !== undefined) {
		const page = event.key.startsWith('Page');
		const size = page ? stepsOfMove(PAGE_STEP_CENTS) : stepsOfMove(COARSE_STEP_CENTS);
		return { kind: 'move', steps: way * (event.shiftKey && !page ? 1 : size) };
	}
	if (event.repeat) return null;
	if (event.key === ' ' && !onControl) return { kind: 'strike' };
	if (event.key === 'Enter' && !onControl) return { kind: 'commit' };
	const letter = LETTERS[event.key.toLowerCase()];
	return letter && lettersOn && !event.shiftKey ? { kind: letter } : null;
}
