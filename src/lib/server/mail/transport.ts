import { createTransport, type Transporter } from 'nodemailer';
import { env } from '../env';

let transport: { url: string; transporter: Transporter } | undefined;

/** How long the mail server may say nothing, milliseconds. */
const TIMEOUTS = { connectionTimeout: 10_000, greetingTimeout: 10_000, socketTimeout: 20_000 };

/**
 * SMTP_URL with the timeouts that it does not set itself. Each mail waits for the one before it: a
 * server that says nothing must not hold them all. nodemailer takes them from the address alone.
 */
export function withTimeouts(url: string): string {
	const whole = new URL(url);
	for (const [name, value] of Object.entries(TIMEOUTS)) {
		if (!whole.searchParams.has(name)) whole.searchParams.set(name, String(value));
	}
	return whole.href;
}

/**
 * Hands one mail to the SMTP server of SMTP_URL.
 * @throws what the server or the network answered.
 */
export async function sendBySmtp(mail: {
	to: string;
	subject: string;
	text: string;
	html: string;
	messageId: string;
}): Promise<void> {
	const { SMTP_URL: url, MAIL_FROM: from } = env();
	if (transport?.url !== url) {
		transport?.transporter.close();
		const transporter = createTransport(withTimeouts(url), {
			from,
			// A recipient is an address, never a path or a link to fetch.
			disableFileAccess: true,
			disableUrlAccess: true
		});
		transport = { url, transporter };
	}
	await transport.transporter.sendMail({
		...mail,
		to: { name: '', address: mail.to },
		headers: { 'Auto-Submitted': 'auto-generated' }
	});
}

/** Closes idle connections to the SMTP server. */
export function closeTransport(): void {
	transport?.transporter.close();
	transport = undefined;
}
