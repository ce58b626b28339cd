import { QueryTypes, type Transaction } from 'sequelize';
import type { Actor } from '../auth';
import { database } from '../database';
import { AuditEntry } from '../models';
import { Refusal } from '../refusal';

export interface Deed {
	/** Who did it; null when nobody is signed in. */
	actorId: string | null;
	/** Noun and verb in the past: `user.deactivated`. */
	action: string;
	subject?: { type: 'user' | 'class' | 'invitation' | 'attempt' | 'mail'; id: string };
	/** Facts that help later; never secrets. */
	detail?: Record<string, unknown>;
}

/** Writes one line of the audit trail, in the transaction of the deed itself. */
export async function audit(deed: Deed, transaction?: Transaction): Promise<void> {
	database();
	await AuditEntry.create(
		{
			actorId: deed.actorId,
			action: deed.action,
			subjectType: deed.subject?.type ?? null,
			subjectId: deed.subject?.id ?? null,
			detail: deed.detail ?? {}
		},
		{ transaction }
	);
}

export interface AuditLine {
	id: string;
	at: Date;
	action: string;
	actorName: string | null;
	subjectType: string | null;
	subjectName: string | null;
	detail: Record<string, unknown>;
}

const PAGE = 50;

/** Who may look after accounts; everything in this file and in users.ts asks. */
export function mustBeAdmin(actor: Actor): void {
	if (actor.role !== 'admin') throw new Refusal('forbidden', 'Only an admin may do this.');
}

/**
 * The audit trail, newest first, fifty lines a page.
 * @param page counts from 1.
 */
export async function listAudit(
	actor: Actor,
	page = 1
): Promise<{ lines: AuditLine[]; more: boolean }> {
	mustBeAdmin(actor);
	const rows = await database().query<AuditLine>(
		`SELECT e.id, e.created_at AS "at", e.action, a.name AS "actorName",
			e.subject_type AS "subjectType", e.detail,
			COALESCE(u.name, c.name, e.subject_id) AS "subjectName"
		FROM audit_entry e
		LEFT JOIN "user" a ON a.id = e.actor_id
		LEFT JOIN "user" u ON e.subject_type = 'user' AND u.id::text = e.subject_id
		LEFT JOIN class c ON e.subject_type = 'class' AND c.id::text = e.subject_id
		ORDER BY e.created_at DESC, e.id
		LIMIT :limit OFFSET :offset`,
		{
			type: QueryTypes.SELECT,
			replacements: { limit: PAGE + 1, offset: (Math.max(1, page) - 1) * PAGE }
		}
	);
	return { lines: rows.slice(0, PAGE), more: rows.length > PAGE };
}
