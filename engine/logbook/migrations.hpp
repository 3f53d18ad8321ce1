// The tables of the log, told as the steps from one version of the format to the next. A new file takes all
// of them, so that it holds the same SQL as one that grew up.
#pragma once

#include <array>
#include <cstdint>

namespace bathwright::logbook {

inline constexpr std::array migrations{
    // Version 1.
    R"sql(
CREATE TABLE entry (
  seq      INTEGER PRIMARY KEY CHECK (seq >= 1),
  kind     TEXT NOT NULL,
  tank     TEXT NOT NULL,
  shift    TEXT NOT NULL,
  at       TEXT NOT NULL,
  station  TEXT NOT NULL,
  "by"     TEXT NOT NULL,
  body     TEXT NOT NULL,
  corrects INTEGER REFERENCES entry (seq),
  program  TEXT NOT NULL,
  previous TEXT NOT NULL,
  hash     TEXT NOT NULL UNIQUE
) STRICT;
CREATE INDEX entry_by_tank ON entry (tank, kind, seq);
CREATE TRIGGER entry_no_update BEFORE UPDATE ON entry
  BEGIN SELECT RAISE(ABORT, 'log entries are never changed; add a correction'); END;
CREATE TRIGGER entry_no_delete BEFORE DELETE ON entry
  BEGIN SELECT RAISE(ABORT, 'log entries are never deleted; add a correction'); END;
-- INSERT OR REPLACE passes by the delete trigger, hence a trigger of its own
CREATE TRIGGER entry_no_replace BEFORE INSERT ON entry
  WHEN EXISTS (SELECT 1 FROM entry WHERE seq = NEW.seq OR hash = NEW.hash)
  BEGIN SELECT RAISE(ABORT, 'log entries are never replaced; add a correction'); END;
CREATE TRIGGER entry_in_order BEFORE INSERT ON entry
  WHEN NEW.seq IS NOT (SELECT coalesce(max(seq), 0) + 1 FROM entry)
  BEGIN SELECT RAISE(ABORT, 'log entries are numbered without gaps'); END;
)sql",
    // Version 2: two clocks, people and their signatures, what was computed with; a search that stays quick.
    R"sql(
ALTER TABLE entry RENAME COLUMN corrects TO about;
ALTER TABLE entry ADD COLUMN form INTEGER NOT NULL DEFAULT 1 CHECK (form IN (1, 2));
ALTER TABLE entry ADD COLUMN happened TEXT NOT NULL DEFAULT '';
ALTER TABLE entry ADD COLUMN boot TEXT NOT NULL DEFAULT '';
ALTER TABLE entry ADD COLUMN uptime_ms INTEGER NOT NULL DEFAULT 0;
ALTER TABLE entry ADD COLUMN role TEXT NOT NULL DEFAULT '';
ALTER TABLE entry ADD COLUMN witness TEXT NOT NULL DEFAULT '';
ALTER TABLE entry ADD COLUMN bath_type TEXT NOT NULL DEFAULT '';
ALTER TABLE entry ADD COLUMN signature TEXT NOT NULL DEFAULT '';
ALTER TABLE entry ADD COLUMN witness_signature TEXT NOT NULL DEFAULT '';
CREATE INDEX entry_by_kind ON entry (kind, seq);
-- The latest wall clock so far: unlike "at" it never falls, whatever is done to the clock, so that the entries of
-- a span of time are a span of numbers, apart from those logged while the clock was behind.
ALTER TABLE entry ADD COLUMN latest_at TEXT NOT NULL DEFAULT '';
DROP TRIGGER entry_no_update;
UPDATE entry SET latest_at = told.at FROM (SELECT seq, max(at) OVER (ORDER BY seq) AS at FROM entry) AS told
  WHERE told.seq = entry.seq;
CREATE TRIGGER entry_no_update BEFORE UPDATE ON entry
  BEGIN SELECT RAISE(ABORT, 'log entries are never changed; add a correction'); END;
CREATE INDEX entry_by_time ON entry (latest_at, seq);
CREATE INDEX entry_set_back ON entry (at, seq) WHERE at < latest_at;
CREATE INDEX entry_by_writer ON entry ("by", seq);
CREATE INDEX entry_by_answered ON entry (about, kind) WHERE about IS NOT NULL;
-- Three letters and more are found by index wherever they stand. Filled beside each entry, in its transaction:
-- a trigger may not write here, as the schema of a file is not trusted.
CREATE VIRTUAL TABLE entry_text USING fts5 (
  body, "by", shift, content = 'entry', content_rowid = 'seq', tokenize = 'trigram', detail = 'none', columnsize = 0);
INSERT INTO entry_text (entry_text) VALUES ('rebuild');
)sql"};

inline constexpr std::int64_t schema_version = std::int64_t{migrations.size()};

}  // namespace bathwright::logbook
