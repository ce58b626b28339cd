import { describe, expect, it } from 'vitest';
import { invitationLetter, resetLetter } from './templates';

const href = 'https://tune.example/invitation/abc_-123';

describe('letters', () => {
	it('carry the link in both forms', () => {
		const letter = resetLetter({ name: 'Inga', href, minutes: 60 });
		expect(letter.text).toContain(href);
		expect(letter.html).toContain(`href="${href}"`);
	});

	it('show a name as text, whatever it is', () => {
		const letter = invitationLetter({
			className: '<img src=x onerror=alert(1)>',
			inviterName: '"><script>alert(2)</script>',
			href,
			days: 14
		});
		expect(letter.html).not.toMatch(/<img|<script/);
		expect(letter.html).toContain('&lt;script&gt;');
	});

	it('keep a subject on one line', () => {
		const letter = invitationLetter({
			className: 'Evening\r\nBcc: everybody@example.org',
			inviterName: null,
			href,
			days: 14
		});
		expect(letter.subject).not.toMatch(/[\r\n]/);
	});
});
