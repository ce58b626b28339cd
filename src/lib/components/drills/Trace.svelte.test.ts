import { cleanup, render, screen } from '@testing-library/svelte';
import { afterEach, describe, expect, it } from 'vitest';
import { generateBlock } from '../../drills/generate';
import { scoreTrial } from '../../drills/score';
import type { RawTrial } from '../../drills/types';
import Trace from './Trace.svelte';

afterEach(cleanup);

const [spec] = generateBlock('unison', 1).trials;

function drawn(raw: RawTrial) {
	render(Trace, { raw, result: scoreTrial(spec, raw) });
	return screen.getAllByRole('img');
}

describe('the trace of a trial', () => {
	it('says in words what it draws, one of a thing as one', () => {
		const committedCents = spec.startCents - 0.5;
		const pictures = drawn({
			index: 0,
			startCents: spec.startCents,
			trace: [
				[100, 'strike', spec.startCents],
				[400, 'move', committedCents]
			],
			committedCents,
			committedAtMs: 1040
		});
		for (const picture of pictures) {
			expect(picture.getAttribute('aria-label')).toContain('1 blow and 1 move in 1 second;');
			expect(picture.textContent).toContain('1 second');
			expect(picture.textContent).not.toContain('1 seconds');
		}
	});

	it('counts several, and keeps the end of the line in the picture', () => {
		const pictures = drawn({
			index: 0,
			startCents: spec.startCents,
			trace: [
				[100, 'strike', spec.startCents],
				[900, 'strike', spec.startCents]
			],
			committedCents: spec.startCents,
			committedAtMs: 24_400
		});
		for (const picture of pictures) {
			expect(picture.getAttribute('aria-label')).toContain('2 blows and 0 moves in 24 seconds;');
			const width = Number(picture.getAttribute('width'));
			const line = picture.querySelector('.line')?.getAttribute('d') ?? '';
			const end = Number(/H([\d.]+)$/.exec(line)?.[1]);
			// The mark at the end is 14 px wide.
			expect(end + 7).toBeLessThanOrEqual(width);
			expect(end).toBeGreaterThan(width - 12);
		}
	});
});
