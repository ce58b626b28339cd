import { cleanup, render, screen, within } from '@testing-library/svelte';
import { afterEach, describe, expect, it } from 'vitest';
import { STEPS, type OrderState, type PartState } from '../../course/working-order';
import FoldingRule from './FoldingRule.svelte';
import RemarkTag from './RemarkTag.svelte';

afterEach(cleanup);

/** A place in the order for drawing: all before `now` is done. */
function at(now: number): OrderState {
	const parts = (states: PartState[]) => ({
		know: states[0],
		hear: states[1],
		do: states[2],
		real: states[3]
	});
	return {
		stepId: STEPS[now - 1].id,
		partId: 'do',
		steps: STEPS.map((step) => ({
			...step,
			here: step.number === now,
			states:
				step.number < now
					? parts(['done', 'done', 'done', 'done'])
					: step.number === now
						? parts(['done', 'done', 'here', 'to-come'])
						: parts(['to-come', 'to-come', 'to-come', 'to-come'])
		}))
	};
}

describe('FoldingRule', () => {
	it('has seven plates and says where one stands', () => {
		render(FoldingRule, { order: at(4) });
		const nav = screen.getByRole('navigation', { name: 'Working order' });
		const plates = nav.querySelectorAll('.plate');
		expect(plates).toHaveLength(7);
		const here = nav.querySelector('[aria-current="step"]');
		expect(here?.textContent).toContain('Temperament octave');
		expect(here?.textContent).toContain('2 of 4 parts done; you are at do');
		expect(plates[0].textContent).toContain('4 of 4 parts done');
		expect(plates[6].textContent).toContain('0 of 4 parts done');
	});

	it('spells out the parts of the step, each with its state in words', () => {
		render(FoldingRule, { order: at(4) });
		const parts = within(screen.getByRole('navigation'))
			.getAllByRole('listitem')
			.filter((item) => !item.classList.contains('plate'));
		expect(parts.map((part) => part.textContent?.replace(/\s+/g, ' ').trim())).toEqual([
			'know done',
			'hear done',
			'do you are here',
			'real to come'
		]);
	});

	it('leaves them out when compact', () => {
		const { container } = render(FoldingRule, { order: at(4), compact: true });
		expect(container.querySelector('.parts')).toBeNull();
		expect(container.querySelectorAll('.plate.done')).toHaveLength(3);
	});

	it('links only where there is somewhere to go', () => {
		render(FoldingRule, {
			order: at(4),
			hrefOf: (step) => (step.number === 4 ? '/practice' : undefined)
		});
		expect(screen.getAllByRole('link')).toHaveLength(1);
	});
});

describe('RemarkTag', () => {
	it('carries the words, who said them, when and about what', () => {
		render(RemarkTag, {
			text: 'Blow while the lever is still on.',
			author: 'Hesper Lindqvarn',
			when: 'yesterday at 18:40',
			about: 'your third A3–D4'
		});
		const tag = screen.getByRole('complementary', { name: 'Remark from Hesper Lindqvarn' });
		expect(tag.querySelector('blockquote')?.textContent).toBe('Blow while the lever is still on.');
		expect(tag.textContent).toContain('yesterday at 18:40');
		expect(tag.textContent).toContain('about your third A3–D4');
	});
});
