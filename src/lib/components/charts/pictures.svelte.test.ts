import { cleanup, render, screen } from '@testing-library/svelte';
import { afterEach, describe, expect, it, vi } from 'vitest';
import Curve from './Curve.svelte';
import RangeGlyph from './RangeGlyph.svelte';
import ShorePair from './ShorePair.svelte';
import { shoreOfTwo } from './two-partials';
import VerdictWord from './VerdictWord.svelte';

afterEach(cleanup);

describe('RangeGlyph', () => {
	const name = () => screen.getByRole('img').getAttribute('aria-label');

	it('says value, interval, verdict and tolerance', () => {
		render(RangeGlyph, {
			value: 0.91,
			interval: [0.87, 0.95],
			tolerance: [0.7, 1.1],
			verdict: 'inside',
			unit: 'beats per second'
		});
		expect(name()).toBe('0.91 beats per second, very likely 0.87 to 0.95, inside 0.7 to 1.1');
	});

	it('marks outside with a hollow diamond, still with a bar and no dot', () => {
		const { container, rerender } = render(RangeGlyph, {
			value: 1.4,
			tolerance: [null, 0.5],
			verdict: 'outside'
		});
		expect(container.querySelector('path.mark')).not.toBeNull();
		expect(container.querySelector('circle')).toBeNull();
		return rerender({ value: null, interval: [0, 0.4], verdict: 'still' }).then(() => {
			expect(container.querySelector('.mark')).toBeNull();
			expect(container.querySelector('.bar')).not.toBeNull();
		});
	});

	it('writes the tolerance once where its brackets are close', () => {
		const { container } = render(RangeGlyph, {
			value: 14,
			tolerance: [-1, 1],
			domain: [-15, 15],
			tags: ['−1.00', '+1.00'],
			verdict: 'outside',
			widthPx: 340
		});
		expect([...container.querySelectorAll('text')].map((tag) => tag.textContent)).toEqual([
			'± 1.00'
		]);
	});

	it('tells near by half a dot', () => {
		const { container } = render(RangeGlyph, {
			value: 0.6,
			interval: [0.4, 0.9],
			tolerance: [null, 0.6],
			verdict: 'near'
		});
		expect(container.querySelector('.half')).not.toBeNull();
		expect(name()).toContain('too close to say');
	});
});

describe('VerdictWord', () => {
	it('says it in a word', () => {
		render(VerdictWord, { verdict: 'outside' });
		expect(screen.getByText('outside')).toBeTruthy();
	});
});

describe('ShorePair', () => {
	const draw = (yoursRateHz: number, targetRateHz: number) =>
		render(ShorePair, {
			props: {
				yours: shoreOfTwo({ rateHz: yoursRateHz, phase: 0.2 }),
				target: shoreOfTwo({ rateHz: targetRateHz, phase: 0.2 }),
				yoursRateHz,
				targetRateHz,
				label: 'A5, as A3–D4 sounds there'
			}
		});

	it('says the same in words as in the picture', () => {
		draw(0.49, 0.9);
		const label = screen.getByRole('img').getAttribute('aria-label');
		expect(label).toBe(
			'A5, as A3–D4 sounds there. yours, 0.49 beats per second; target, 0.90 beats per second. Your beat is the slower one.'
		);
	});

	it('moors the beats that both have, one by one', () => {
		const { container } = draw(0.49, 0.9);
		const wide = container.querySelector('.wide');
		expect(wide?.querySelectorAll('.tie2')).toHaveLength(2);
		expect(wide?.querySelectorAll('.knot.goal')).toHaveLength(4);
		expect(wide?.querySelectorAll('.gr')).toHaveLength(0);
	});

	it('numbers the beats of both alike, and fewer where they crowd', () => {
		const numbers = (goal: boolean) =>
			[...document.querySelectorAll(`.slim text.n${goal ? '.goal' : ':not(.goal)'}`)].map(
				(text) => text.textContent
			);
		draw(0.49, 0.9);
		expect(numbers(false)).toEqual(['1', '2']);
		expect(numbers(true)).toEqual(['1', '2', '3', '4']);
		cleanup();
		draw(3.9, 3.8);
		// In 4 s: quietest at (0.468 + k) / rate seconds, k from 0: 16 beats and 15.
		expect(document.querySelectorAll('.slim .knot:not(.goal)')).toHaveLength(16);
		expect(document.querySelectorAll('.slim .knot.goal')).toHaveLength(15);
		expect(numbers(false)).toEqual(['2', '4', '6', '8', '10', '12', '14', '16']);
		expect(numbers(true)).toEqual(['2', '4', '6', '8', '10', '12', '14']);
	});

	it('puts the rule in their place when they crowd', () => {
		const { container } = draw(7, 6.76);
		expect(container.querySelectorAll('.tie2')).toHaveLength(0);
		expect(container.querySelectorAll('.wide .gr:not(.goal)')).toHaveLength(28);
		expect(container.querySelectorAll('.wide .gr.goal.full')).toHaveLength(5);
	});

	it('says when there is no beat', () => {
		draw(0, 0.9);
		expect(screen.getByRole('img').getAttribute('aria-label')).toContain('yours, no beat');
	});
});

describe('Curve', () => {
	it('stands in a table as well, day by day', () => {
		vi.stubGlobal('matchMedia', () => ({
			matches: true,
			addEventListener() {},
			removeEventListener() {}
		}));
		render(Curve, {
			title: 'Unison, error left',
			points: [
				{ at: '2026-11-01T09:00:00Z', value: 2 },
				{ at: '2026-11-03T09:00:00Z', value: 0.8 },
				{ at: '2026-11-03T10:00:00Z', value: 0.6 }
			],
			tolerance: 1
		});
		const cells = [...document.querySelectorAll('tbody tr')].map((row) => row.textContent?.trim());
		expect(cells).toHaveLength(2);
		expect(cells[0]).toMatch(/3 Nov\.\s*0\.70\s*0\.80, 0\.60/);
		expect(screen.getByRole('img').getAttribute('aria-label')).toBe(
			'Unison, error left. Median 2.00 cents on 1 Nov., 0.70 on 3 Nov.; the tolerance is 1 cent.'
		);
		vi.unstubAllGlobals();
	});
});
