/** A mail before it is addressed. */
export interface Letter {
	kind: 'invitation' | 'reset' | 'welcome' | 'notice';
	subject: string;
	text: string;
	html: string;
}

interface Parts {
	kind: Letter['kind'];
	subject: string;
	/** Paragraphs before the link. */
	before: string[];
	link?: { href: string; text: string };
	/** Paragraphs after the link. */
	after: string[];
}

const escapeHtml = (text: string) =>
	text.replace(
		/[&<>"']/g,
		(sign) =>
			({ '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' })[sign] as string
	);

/** A name inside a sentence or a subject line: one line, of a sensible length. */
const oneLine = (text: string) =>
	text
		// Control signs are what is taken out here.
		// eslint-disable-next-line no-control-regex
		.replace(/[\u0000-\u001f\u007f\u2028\u2029]+/g, ' ')
		.trim()
		.slice(0, 120);

function letter({ kind, subject, before, link, after }: Parts): Letter {
	const text = [
		...before,
		...(link ? [`${link.text}:\n${link.href}`] : []),
		...after,
		'-- \nEbbtone'
	];
	const paragraph = (line: string) => `<p style="margin:0 0 16px">${escapeHtml(line)}</p>`;
	const button = link
		? `<p style="margin:24px 0"><a href="${escapeHtml(link.href)}" style="display:inline-block;padding:12px 24px;border-radius:4px;background:#163a2f;color:#fbf6ea;font-weight:bold;text-decoration:none">${escapeHtml(link.text)}</a></p>` +
			`<p style="margin:0 0 16px;color:#47604f;font-size:15px">Or copy this address into your browser:<br>${escapeHtml(link.href)}</p>`
		: '';
	const html =
		`<!doctype html><html lang="en"><head><meta charset="utf-8"><title>${escapeHtml(subject)}</title></head>` +
		`<body style="margin:0;padding:32px 20px;background:#f5eddb;color:#163a2f;font:18px/1.5 Georgia,serif">` +
		`<div style="max-width:34em;margin:0 auto">${before.map(paragraph).join('')}${button}${after.map(paragraph).join('')}` +
		`<p style="margin:32px 0 0;color:#47604f">Ebbtone</p></div></body></html>`;
	return { kind, subject, text: text.join('\n\n') + '\n', html };
}

/** A place in a class; `inviterName` null when the person asked for it through the join link. */
export function invitationLetter(facts: {
	className: string;
	inviterName: string | null;
	href: string;
	days: number;
}): Letter {
	const className = oneLine(facts.className);
	const first = facts.inviterName
		? `${oneLine(facts.inviterName)} invites you to the class “${className}” on Ebbtone, where you train your ear and hand for tuning pianos.`
		: `You asked to join the class “${className}” on Ebbtone, where you train your ear and hand for tuning pianos.`;
	return letter({
		kind: 'invitation',
		subject: `Your place in the class “${className}”`,
		before: ['Hello,', first],
		link: { href: facts.href, text: 'Take your place' },
		after: [
			`The link is for you alone, works once, and lasts ${facts.days} days.`,
			'If you do not know what this is about, do nothing: no account is made unless the link is used.'
		]
	});
}

export function resetLetter(facts: { name: string; href: string; minutes: number }): Letter {
	return letter({
		kind: 'reset',
		subject: 'Choose a new password',
		before: [
			`Hello ${oneLine(facts.name)},`,
			'Somebody, probably you, asked for a new password for your Ebbtone account.'
		],
		link: { href: facts.href, text: 'Choose a new password' },
		after: [
			`The link works once and lasts ${facts.minutes} minutes.`,
			'If it was not you, do nothing: your password stays as it is.'
		]
	});
}

export function welcomeLetter(facts: {
	name: string;
	role: string;
	href: string;
	days: number;
}): Letter {
	return letter({
		kind: 'welcome',
		subject: 'Your Ebbtone account',
		before: [
			`Hello ${oneLine(facts.name)},`,
			`An account has been made for you on Ebbtone, with the role ${facts.role}. Choose a password to begin.`
		],
		link: { href: facts.href, text: 'Choose a password' },
		after: [`The link works once and lasts ${facts.days} days.`]
	});
}

export function passwordChangedLetter(facts: { name: string; href: string }): Letter {
	return letter({
		kind: 'notice',
		subject: 'Your password was changed',
		before: [
			`Hello ${oneLine(facts.name)},`,
			'The password of your Ebbtone account was changed just now, and every other browser was signed out.'
		],
		link: { href: facts.href, text: 'It was not me: choose a new password' },
		after: ['If it was you, there is nothing to do.']
	});
}
