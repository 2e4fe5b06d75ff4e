-- Layout 1. {columns} stands for the texts and ratings of fields.def that are not written out here.

-- The log: one row per act on the database. hash chains every entry to the one before it.
CREATE TABLE entry (
  id INTEGER PRIMARY KEY CONSTRAINT "entries are numbered from 1" CHECK (id > 0),
  kind TEXT NOT NULL CONSTRAINT "an entry is an import, undo, merge or review"
    CHECK (kind IN ('import', 'undo', 'merge', 'review')),
  author TEXT NOT NULL CONSTRAINT "an entry needs an author" CHECK (trim(author) <> ''),
  time TEXT NOT NULL CONSTRAINT "a time is written as 2025-03-01T12:00:00Z" CHECK (time GLOB
    '[0-9][0-9][0-9][0-9]-[0-1][0-9]-[0-3][0-9]T[0-2][0-9]:[0-5][0-9]:[0-6][0-9]Z'),
  why TEXT,
  "key" TEXT,
  undoes INTEGER REFERENCES entry (id)
    CONSTRAINT "only an undo takes an earlier entry back" CHECK ((kind = 'undo') = (undoes IS NOT NULL)),
  hash BLOB NOT NULL CONSTRAINT "a hash has 32 bytes" CHECK (length(hash) = 32)
) STRICT;

CREATE INDEX entry_by_key ON entry ("key") WHERE "key" IS NOT NULL;
CREATE INDEX entry_by_undoes ON entry (undoes) WHERE undoes IS NOT NULL;

-- The files of an import.
CREATE TABLE source (
  entry INTEGER NOT NULL REFERENCES entry (id),
  position INTEGER NOT NULL,
  name TEXT NOT NULL,
  sha256 TEXT NOT NULL CONSTRAINT "a SHA-256 has 64 hexadecimal digits"
    CHECK (length(sha256) = 64 AND sha256 NOT GLOB '*[^0-9a-f]*'),
  PRIMARY KEY (entry, position)
) STRICT, WITHOUT ROWID;

-- Curves for evaluation: packed doubles, read without parsing.
CREATE TABLE curve (
  id INTEGER PRIMARY KEY,
  packed BLOB NOT NULL CONSTRAINT "packed curves are whole 8-byte words" CHECK (length(packed) % 8 = 0)
) STRICT;

-- The same curves for analysts; the audit proves that both agree.
CREATE TABLE curve_json (
  id INTEGER PRIMARY KEY REFERENCES curve (id),
  json TEXT NOT NULL
) STRICT;

-- What every part states now: one row per part.
CREATE TABLE part (
  id INTEGER PRIMARY KEY,
  number INTEGER NOT NULL CONSTRAINT "revisions are numbered from 1" CHECK (number > 0),
  entry INTEGER NOT NULL REFERENCES entry (id),
  withdrawn INTEGER NOT NULL CONSTRAINT "withdrawn is 0 or 1" CHECK (withdrawn IN (0, 1)),
  content BLOB NOT NULL CONSTRAINT "a hash has 32 bytes" CHECK (length(content) = 32),
  name TEXT NOT NULL CONSTRAINT "a part needs a name" CHECK (trim(name) <> ''),
  maker TEXT CONSTRAINT "a maker that is not stated is NULL, not blank" CHECK (trim(maker) <> ''),
  polarity TEXT NOT NULL CONSTRAINT "a part needs a polarity, N or P" CHECK (polarity IN ('N', 'P')),
  status TEXT CONSTRAINT "the status must be active, not-for-new, obsolete or banned"
    CHECK (status IN ('active', 'not-for-new', 'obsolete', 'banned')),
  status_reason TEXT,
  rdson TEXT CONSTRAINT "rdson is a JSON list of [gate drive in V, resistance in Ohm]"
    CHECK (rdson GLOB '[[][[]*]]'),
  soa_top_V REAL CONSTRAINT "voltages of the SOA must be positive" CHECK (soa_top_V > 0),
  curves INTEGER REFERENCES curve (id),
  {columns},
  CONSTRAINT "a part needs vds_max" CHECK (vds_max_V IS NOT NULL),
  CONSTRAINT "a part needs tj_max" CHECK (tj_max_degC IS NOT NULL),
  CONSTRAINT "a banned part needs a reason" CHECK (status IS NOT 'banned' OR trim(ifnull(status_reason, '')) <> ''),
  CONSTRAINT "vth_min must not be above vth_max" CHECK (vth_min_V <= vth_max_V),
  CONSTRAINT "the SOA must not go more than a tenth beyond vds_max" CHECK (soa_top_V <= 1.1 * vds_max_V)
) STRICT;

CREATE UNIQUE INDEX part_by_name ON part (name, ifnull(maker, ''));

-- What parts stated before: every superseded revision, whole.
CREATE TABLE past (
  part INTEGER NOT NULL REFERENCES part (id),
  number INTEGER NOT NULL,
  entry INTEGER NOT NULL REFERENCES entry (id),
  withdrawn INTEGER NOT NULL,
  content BLOB NOT NULL,
  name TEXT NOT NULL,
  maker TEXT,
  polarity TEXT NOT NULL,
  status TEXT,
  status_reason TEXT,
  rdson TEXT,
  soa_top_V REAL,
  curves INTEGER REFERENCES curve (id),
  {columns},
  PRIMARY KEY (part, number)
) STRICT, WITHOUT ROWID;

-- Second-person checks: one row per review entry.
CREATE TABLE review (
  entry INTEGER PRIMARY KEY REFERENCES entry (id),
  part INTEGER NOT NULL REFERENCES part (id),
  number INTEGER NOT NULL,
  verdict TEXT NOT NULL CONSTRAINT "a review accepts or questions" CHECK (verdict IN ('accept', 'question'))
) STRICT;

CREATE INDEX review_by_revision ON review (part, number);
