import type { QueryInterface } from 'sequelize';

/**
 * What a student has done: attempts at drills with their daily rollup, checks of real strings, and
 * remarks of an instructor.
 *
 * An attempt is written once and never changed: a trigger refuses every update. `day` is the day, in
 * UTC, on which it counts; `attempt_daily` holds one row for each student, drill and day, recomputed
 * in the transaction that adds the attempt. `error_low` and `error_high` are the 95 % interval of
 * `error_median`; `tolerance_cents` is the tolerance its trials were judged by (their median).
 */
const UP = `
CREATE TABLE attempt (
	id uuid PRIMARY KEY,
	student_id uuid NOT NULL REFERENCES "user" (id) ON DELETE RESTRICT,
	drill text NOT NULL CHECK (drill ~ '^[a-z][a-z0-9-]{0,39}$'),
	engine_version integer NOT NULL CHECK (engine_version >= 1),
	seed bigint NOT NULL CHECK (seed >= 0),
	content_hash text NOT NULL CHECK (content_hash ~ '^[0-9a-f]{64}$'),
	stimulus jsonb NOT NULL CHECK (jsonb_typeof(stimulus) = 'object'),
	device jsonb NOT NULL CHECK (jsonb_typeof(device) = 'object'),
	trials jsonb NOT NULL CHECK (jsonb_typeof(trials) = 'array'),
	client_score double precision NOT NULL,
	server_score double precision NOT NULL,
	score_flagged boolean NOT NULL DEFAULT false,
	result jsonb NOT NULL CHECK (jsonb_typeof(result) = 'object'),
	error_median double precision NOT NULL CHECK (error_median >= 0),
	error_low double precision NOT NULL,
	error_high double precision NOT NULL,
	tolerance_cents double precision NOT NULL CHECK (tolerance_cents > 0),
	inside integer NOT NULL CHECK (inside >= 0),
	trial_count integer NOT NULL CHECK (trial_count >= 1),
	seconds integer NOT NULL CHECK (seconds >= 0),
	day date NOT NULL,
	started_at timestamptz NOT NULL,
	finished_at timestamptz NOT NULL,
	received_at timestamptz NOT NULL DEFAULT now(),
	CHECK (finished_at >= started_at),
	CHECK (inside <= trial_count),
	CHECK (error_low <= error_median AND error_median <= error_high),
	UNIQUE (id, student_id)
);
CREATE INDEX attempt_student_finished ON attempt (student_id, finished_at DESC, id DESC);
CREATE INDEX attempt_student_drill_finished ON attempt (student_id, drill, finished_at DESC, id DESC)
	INCLUDE (day, error_median, error_low, error_high, tolerance_cents, inside, trial_count);
CREATE INDEX attempt_student_drill_day ON attempt (student_id, drill, day)
	INCLUDE (error_median, seconds);

CREATE FUNCTION attempt_is_append_only() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
	RAISE EXCEPTION 'an attempt is never changed';
END $$;
CREATE TRIGGER attempt_append_only BEFORE UPDATE ON attempt
	FOR EACH ROW EXECUTE FUNCTION attempt_is_append_only();

CREATE TABLE attempt_daily (
	student_id uuid NOT NULL REFERENCES "user" (id) ON DELETE RESTRICT,
	drill text NOT NULL CHECK (drill ~ '^[a-z][a-z0-9-]{0,39}$'),
	day date NOT NULL,
	attempts integer NOT NULL DEFAULT 0 CHECK (attempts >= 0),
	seconds integer NOT NULL DEFAULT 0 CHECK (seconds >= 0),
	median_error double precision CHECK (median_error >= 0),
	PRIMARY KEY (student_id, drill, day)
);

CREATE TABLE string_check (
	id uuid PRIMARY KEY,
	student_id uuid NOT NULL REFERENCES "user" (id) ON DELETE RESTRICT,
	content_hash text NOT NULL CHECK (content_hash ~ '^[0-9a-f]{64}$'),
	kind text NOT NULL CHECK (kind IN ('note', 'unison', 'interval')),
	notes text[] NOT NULL CHECK (cardinality(notes) BETWEEN 0 AND 2),
	source text NOT NULL CHECK (source IN ('microphone', 'file')),
	result jsonb NOT NULL CHECK (jsonb_typeof(result) = 'object'),
	device jsonb NOT NULL CHECK (jsonb_typeof(device) = 'object'),
	checked_at timestamptz NOT NULL,
	received_at timestamptz NOT NULL DEFAULT now()
);
CREATE INDEX string_check_student_checked ON string_check (student_id, checked_at DESC, id DESC);

CREATE TABLE remark (
	id uuid PRIMARY KEY DEFAULT gen_random_uuid(),
	student_id uuid NOT NULL REFERENCES "user" (id) ON DELETE RESTRICT,
	author_id uuid NOT NULL REFERENCES "user" (id) ON DELETE RESTRICT,
	attempt_id uuid,
	text text NOT NULL CHECK (char_length(text) BETWEEN 1 AND 2000),
	created_at timestamptz NOT NULL DEFAULT now(),
	seen_at timestamptz,
	CHECK (author_id <> student_id),
	FOREIGN KEY (attempt_id, student_id) REFERENCES attempt (id, student_id) ON DELETE RESTRICT
);
CREATE INDEX remark_student_created ON remark (student_id, created_at DESC);
CREATE INDEX remark_attempt ON remark (attempt_id) WHERE attempt_id IS NOT NULL;
`;

const DOWN = `
DROP TABLE remark;
DROP TABLE string_check;
DROP TABLE attempt_daily;
DROP TABLE attempt;
DROP FUNCTION attempt_is_append_only();
`;

export async function up(queryInterface: QueryInterface): Promise<void> {
	await queryInterface.sequelize.transaction(async (transaction) => {
		await queryInterface.sequelize.query(UP, { transaction });
	});
}

export async function down(queryInterface: QueryInterface): Promise<void> {
	await queryInterface.sequelize.transaction(async (transaction) => {
		await queryInterface.sequelize.query(DOWN, { transaction });
	});
}
