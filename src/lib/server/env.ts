import { z } from 'zod';

/** What an operator may set. Everything is read from the process environment, once. */
const schema = z.object({
	DATABASE_URL: z.string().regex(/^postgres(ql)?:\/\//, 'must start with postgres://'),
	/** Signs sessions and derives join links. Changing it signs everyone out. */
	AUTH_SECRET: z.string().min(32, 'must have at least 32 characters'),
	/** The one address people use, scheme and port included. */
	ORIGIN: z.url(),
	SMTP_URL: z.string().regex(/^smtps?:\/\//, 'must start with smtp:// or smtps://'),
	MAIL_FROM: z.string().min(3).default('Ebbtone <ebbtone@localhost>'),
	/** Folder in which the local mail sink keeps what it received; only set in demo mode. */
	MAIL_SINK_DIR: z.string().optional(),
	/** Connections each process may hold. */
	DATABASE_POOL: z.coerce.number().int().min(1).max(100).default(10),
	LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info')
});

export type Environment = z.infer<typeof schema>;

let known: Environment | undefined;

/**
 * The settings of this process.
 * @throws Error naming each setting that is missing or wrong, never its value.
 */
export function env(): Environment {
	if (known) return known;
	const parsed = schema.safeParse(process.env);
	if (!parsed.success) {
		const faults = parsed.error.issues.map((i) => `${i.path.join('.')}: ${i.message}`);
		throw new Error(`Settings missing or wrong. ${faults.join('; ')}`);
	}
	known = parsed.data;
	return known;
}

/** Forgets the settings read so far; for tests, which change them. */
export function resetEnv(): void {
	known = undefined;
}

/** Cookies are Secure exactly when people reach the application over https. */
export function usesHttps(): boolean {
	return env().ORIGIN.startsWith('https:');
}
