import { randomUUID } from 'node:crypto';
import type { AttemptSubmission } from '../../src/lib/drills';
import type { Actor } from '../../src/lib/server/auth';
import { Invitation } from '../../src/lib/server/models';
import { storeAttempt } from '../../src/lib/server/services/attempts';
import { ownRemarks, writeRemark } from '../../src/lib/server/services/remarks';
import { storeStringCheck } from '../../src/lib/server/services/string-checks';
import { classOf, person } from './people';
import { playedAttempt } from './played';

/**
 * visitor: nobody is signed in. owner: the student whose records they are. fellow: another student of
 * the class. teacher: teaches it. colleague: an instructor who does not. admin.
 */
export const WHO = ['visitor', 'fellow', 'colleague', 'admin', 'owner', 'teacher'] as const;
export type Who = (typeof WHO)[number];

export interface World {
	actors: Record<Who, Actor | null>;
	/** Values for the parameters of any route, all pointing at the owner's records. */
	params: Record<'classId' | 'studentId' | 'attemptId' | 'token', string>;
	attempt: AttemptSubmission;
	check: { id: string };
	remarkId: string;
	invitationId: string;
}

/** A class with records of one student, new each time. */
export async function makeWorld(): Promise<World> {
	const [owner, fellow] = [await person('student'), await person('student')];
	const [teacher, colleague] = [await person('instructor'), await person('instructor')];
	const admin = await person('admin');
	const classId = await classOf(teacher, [owner, fellow]);
	await classOf(colleague, []);
	const attempt = playedAttempt();
	await storeAttempt(owner, attempt);
	const check = stringCheck();
	await storeStringCheck(owner, check);
	await writeRemark(teacher, { classId, studentId: owner.id, attemptId: attempt.id }, 'Again.');
	const [{ id: remarkId }] = await ownRemarks(owner);
	const invitation = await Invitation.create({
		classId,
		email: `${randomUUID()}@studio.example`,
		tokenHash: randomUUID().replaceAll('-', '').repeat(2),
		invitedBy: teacher.id,
		expiresAt: new Date(Date.now() + 86_400_000)
	});
	return {
		actors: { visitor: null, owner, fellow, teacher, colleague, admin },
		params: { classId, studentId: owner.id, attemptId: attempt.id, token: 'no-such-token' },
		attempt,
		check,
		remarkId,
		invitationId: invitation.id
	};
}

function stringCheck() {
	return {
		id: randomUUID(),
		kind: 'note',
		notes: ['A4'],
		source: 'file',
		result: { notes: [], pairs: [], advice: [] },
		device: {
			sampleRateHz: 44_100,
			echoCancellation: null,
			noiseSuppression: null,
			autoGainControl: null,
			userAgentClass: 'desktop-chromium'
		},
		checkedAt: '2026-05-04T10:00:00.000Z'
	};
}
