import { QueryTypes } from 'sequelize';
import { z } from 'zod';
import { noteName, midiFromNoteName } from '../../acoustics/units';
import type { MeasureResult } from '../../measurement/types';
import type { Actor } from '../auth';
import { database } from '../database';
import { StringCheck } from '../models';
import { Refusal } from '../refusal';
import { contentHash } from './content-hash';
import type { Scope } from './visibility';

const hz = z.number().min(0).max(100_000);
const interval = z.tuple([z.number(), z.number()]);
const sentence = z.string().max(500);
const note = z
	.string()
	.max(5)
	.transform((name, context) => {
		const midi = midiFromNoteName(name);
		if (midi !== null) return noteName(midi);
		context.addIssue({ code: 'custom', message: 'not a note' });
		return z.NEVER;
	});

const noteMeasure = z.strictObject({
	note: z.string().max(5),
	f1Hz: hz.nullable(),
	f1Ci95Hz: interval.nullable(),
	inharmonicity: z.number().nullable(),
	inharmonicityCi95: interval.nullable(),
	centsFromEqual: z.number().nullable()
});

const pairMeasure = z.strictObject({
	lowerPartial: z.number().int().min(1).max(100),
	upperPartial: z.number().int().min(1).max(100),
	frequencyHz: hz,
	verdict: z.enum(['beating', 'still', 'not-measurable']),
	tier: z.enum(['firm', 'about']).nullable(),
	beatRateHz: z.number().nullable(),
	ci95Hz: interval.nullable(),
	windowSeconds: interval,
	reason: sentence.nullable()
});

/**
 * A string check as a browser sends it. Every object is strict and every list is short: there is no
 * place in it where sound could travel.
 */
export const stringCheckSchema = z.strictObject({
	id: z.uuid(),
	kind: z.enum(['note', 'unison', 'interval']),
	notes: z.array(note).max(2),
	source: z.enum(['microphone', 'file']),
	result: z.strictObject({
		notes: z.array(noteMeasure).max(2),
		pairs: z.array(pairMeasure).max(128),
		advice: z.array(sentence).max(20)
	}),
	device: z.strictObject({
		sampleRateHz: z.number().min(8000).max(384_000),
		echoCancellation: z.boolean().nullable(),
		noiseSuppression: z.boolean().nullable(),
		autoGainControl: z.boolean().nullable(),
		userAgentClass: z.string().min(1).max(60)
	}),
	checkedAt: z.iso.datetime()
});

export type StringCheckSubmission = z.infer<typeof stringCheckSchema>;

/**
 * Stores the numbers of a string check of the actor's own, once: the same again is the same.
 * @throws Refusal 'invalid', 'conflict' (another check under that id), 'not-found' (another's id).
 */
export async function storeStringCheck(
	actor: Actor,
	body: unknown,
	now = new Date()
): Promise<{ id: string; created: boolean }> {
	const parsed = stringCheckSchema.safeParse(body);
	if (!parsed.success) {
		const path = parsed.error.issues[0].path.map(String).join('.');
		throw new Refusal('invalid', `The string check is malformed${path ? ` at ${path}` : ''}.`);
	}
	const check = { ...parsed.data, id: parsed.data.id.toLowerCase() };
	const checkedMs = Date.parse(check.checkedAt);
	if (!(checkedMs >= 0))
		throw new Refusal('invalid', 'The string check is malformed at checkedAt.');
	const hash = contentHash(check);
	const [rows] = await database().query(
		`INSERT INTO string_check (id, student_id, content_hash, kind, notes, source, result, device,
			checked_at, received_at)
		VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10)
		ON CONFLICT (id) DO NOTHING RETURNING id`,
		{
			bind: [
				check.id,
				actor.id,
				hash,
				check.kind,
				check.notes,
				check.source,
				JSON.stringify(check.result),
				JSON.stringify(check.device),
				new Date(Math.min(checkedMs, now.getTime())),
				now
			]
		}
	);
	if (rows.length === 1) return { id: check.id, created: true };
	const before = await StringCheck.findOne({ where: { id: check.id, studentId: actor.id } });
	if (!before) {
		throw new Refusal('not-found', 'This string check cannot be stored for your account.');
	}
	if (before.contentHash !== hash) {
		throw new Refusal('conflict', 'Another string check is already stored under this id.');
	}
	return { id: check.id, created: false };
}

export interface StringCheckView {
	id: string;
	kind: 'note' | 'unison' | 'interval';
	notes: string[];
	source: 'microphone' | 'file';
	result: MeasureResult;
	/** ISO 8601, UTC. */
	checkedAt: string;
}

/** The newest string checks that a scope reaches, at most `limit` a student. */
export async function stringChecksIn(scope: Scope, limit: number): Promise<StringCheckView[]> {
	const rows = await database().query<Omit<StringCheckView, 'checkedAt'> & { checkedAt: Date }>(
		`WITH ${scope.cte}
		SELECT c.id, c.kind, c.notes, c.source, c.result, c.checked_at AS "checkedAt"
		FROM visible v
		CROSS JOIN LATERAL (
			SELECT * FROM string_check s
			WHERE s.student_id = v.student_id AND s.checked_at >= v.since
			ORDER BY s.checked_at DESC, s.id DESC LIMIT :limit
		) c
		ORDER BY c.checked_at DESC, c.id DESC`,
		{ type: QueryTypes.SELECT, replacements: { ...scope.values, limit } }
	);
	return rows.map((row) => ({ ...row, checkedAt: row.checkedAt.toISOString() }));
}
