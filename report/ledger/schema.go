package ledger

// applicationID marks our files in their SQLite header, so that another
// program's database is not taken for a ledger.
const applicationID = 0x4853504e

// A schema is the list of steps that lead from an empty file to the present
// form. PRAGMA user_version counts the steps taken; steps are only ever added.
type schema []string

// readSchema is the form of halfspan.ledger.
var readSchema = schema{`
CREATE TABLE meta (key TEXT PRIMARY KEY, value TEXT NOT NULL) WITHOUT ROWID;
INSERT INTO meta VALUES ('kind', 'read'), ('changes', '0');
CREATE TABLE papers (
	paper_id INTEGER PRIMARY KEY,
	name     TEXT NOT NULL UNIQUE, -- relative to the scanned folder, with '/'
	sha256   TEXT NOT NULL,
	format   TEXT NOT NULL,
	title    TEXT NOT NULL,
	pages    INTEGER NOT NULL,
	reader   TEXT NOT NULL,        -- the version of the program that read it, and how
	failure  TEXT NOT NULL,        -- why it could not be read; empty when it could
	problems TEXT NOT NULL,        -- JSON
	missing  INTEGER NOT NULL DEFAULT 0
);
CREATE INDEX papers_sha256 ON papers (sha256);
CREATE TABLE results (
	id       TEXT PRIMARY KEY,
	paper_id INTEGER NOT NULL REFERENCES papers ON DELETE CASCADE,
	ord      INTEGER NOT NULL,     -- reading order in the paper
	working  TEXT NOT NULL,        -- JSON: record, anchor, trail, flags
	result   TEXT NOT NULL,        -- JSON: what was read, before any working
	UNIQUE (paper_id, ord)
) WITHOUT ROWID;
-- The records with the names they have in JSON Lines and CSV.
CREATE VIEW records AS SELECT r.id, p.name AS paper, p.sha256 AS paper_sha256,
` + recordColumns("r.working", "$.record.") + `
FROM results r JOIN papers p USING (paper_id);
`}

// decisionSchema is the form of halfspan.AB.ledger.
var decisionSchema = schema{`
CREATE TABLE meta (key TEXT PRIMARY KEY, value TEXT NOT NULL) WITHOUT ROWID;
INSERT INTO meta VALUES ('kind', 'decisions');
CREATE TABLE decisions (
	seq          INTEGER PRIMARY KEY AUTOINCREMENT,
	decided_at   TEXT NOT NULL,    -- UTC, RFC 3339
	checker      TEXT NOT NULL,
	verdict      TEXT NOT NULL,    -- confirmed, amended, dropped, queried, undone
	undoes       INTEGER,          -- of undone: the seq of the decision taken back
	reason       TEXT NOT NULL,
	note         TEXT NOT NULL,
	mode         TEXT NOT NULL,    -- where and how it was taken
	extra        TEXT NOT NULL,    -- JSON object of strings
	by_hand      TEXT NOT NULL,    -- where a result added by a person was found; empty for the program's own
	version      TEXT NOT NULL,    -- of the program
	result_id    TEXT NOT NULL,
	paper        TEXT NOT NULL,
	paper_sha256 TEXT NOT NULL,
	anchor       TEXT NOT NULL,    -- JSON
	seen         TEXT NOT NULL,    -- JSON: result and working as they were seen, whole
	seen_sha256  TEXT NOT NULL,    -- of its record
	decided      TEXT NOT NULL     -- JSON: result and working as decided
);
CREATE TRIGGER decisions_stay BEFORE UPDATE ON decisions BEGIN SELECT RAISE(ABORT, 'decisions are only ever added'); END;
CREATE TRIGGER decisions_remain BEFORE DELETE ON decisions BEGIN SELECT RAISE(ABORT, 'decisions are only ever added'); END;
-- What a checker wants remembered, such as the outcomes to be shown first.
CREATE TABLE settings (key TEXT PRIMARY KEY, value TEXT NOT NULL) WITHOUT ROWID;
`}

// recordColumns lists the record's fields after paper_sha256 as columns taken
// out of the JSON in column. It is part of the schema: a field added to the
// record means a further step, not a change here.
func recordColumns(column, path string) string {
	names := []string{"page", "section", "table", "snippet", "statistic", "measure", "given_as", "estimate", "lower", "upper",
		"given_value", "level", "n", "n2", "n_from", "n_kind", "arm", "arm2", "time", "subgroup", "outcome", "unit", "heading",
		"adjusted", "p", "t", "f", "df", "mean", "sd", "sd_of", "se", "scale", "sd_digits_low", "sd_digits_high", "sd_normal",
		"method", "use", "reason", "reading", "flags", "mates", "places"}
	text := ""
	for i, name := range names {
		if i > 0 {
			text += ",\n"
		}
		text += "\tjson_extract(" + column + ", '" + path + name + "') AS \"" + name + "\""
	}
	return text
}
