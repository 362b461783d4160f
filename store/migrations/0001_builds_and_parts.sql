-- The first schema: builds with the revisions of their documents, and the drawer of parts.
-- +goose Up

CREATE TABLE builds (
    id         INTEGER PRIMARY KEY AUTOINCREMENT, -- never given twice: an old link finds nothing rather than another build
    revision   INTEGER NOT NULL CHECK (revision >= 1), -- number of the current revision, grows with every save, undo and redo
    step       INTEGER NOT NULL, -- where the current revision stands in the line that undo and redo walk
    first_step INTEGER NOT NULL, -- how far back undo goes
    last_step  INTEGER NOT NULL, -- how far forward redo goes
    created    INTEGER NOT NULL CHECK (created BETWEEN 0 AND 253402300799999), -- [ms] since 1970, UTC
    updated    INTEGER NOT NULL CHECK (updated BETWEEN 0 AND 253402300799999), -- [ms] since 1970, UTC, of the current revision
    deleted_at INTEGER CHECK (deleted_at BETWEEN 0 AND 253402300799999), -- [ms] since 1970, UTC, NULL unless in the bin
    folded     TEXT NOT NULL, -- what the shelf's search looks through, without case and accents
    title      TEXT NOT NULL, -- as in the current document
    client     TEXT NOT NULL, -- as in the current document
    site       TEXT NOT NULL, -- as in the current document
    tags       TEXT NOT NULL CHECK (json_type(tags) = 'array'), -- as in the current document, a JSON array of strings
    verdict    TEXT NOT NULL CHECK (verdict IN ('', 'pass', 'tight', 'unknown', 'fail')), -- of the current document's check, empty when it could not be checked
    card       TEXT NOT NULL, -- the shelf's small picture, opaque here
    CHECK (first_step <= step AND step <= last_step),
    -- The current revision is there. Deferred, because the two rows need each other.
    FOREIGN KEY (id, revision) REFERENCES revisions (build, number) ON DELETE NO ACTION DEFERRABLE INITIALLY DEFERRED
) STRICT;

-- Holds the folded text too, so that a search reads this and not the pictures.
CREATE INDEX builds_shelf ON builds (updated DESC, id DESC, folded) WHERE deleted_at IS NULL;

CREATE TABLE revisions (
    build    INTEGER NOT NULL REFERENCES builds (id) ON DELETE CASCADE, -- a build takes its history along
    number   INTEGER NOT NULL CHECK (number >= 1), -- counts from 1 in each build, without gaps until old ones are pruned
    at       INTEGER NOT NULL CHECK (at BETWEEN 0 AND 253402300799999), -- [ms] since 1970, UTC
    act      TEXT NOT NULL CHECK (act IN ('edit', 'undo', 'redo')), -- how it came about
    step     INTEGER, -- its place in the line that undo and redo walk, NULL once it has left the line
    kept     INTEGER NOT NULL DEFAULT 0 CHECK (kept IN (0, 1)), -- 1 when somebody asked that it stay for ever
    note     TEXT NOT NULL DEFAULT '' CHECK (kept = 1 OR note = ''), -- why it is kept
    title    TEXT NOT NULL, -- these seven are the summary saved with the document, an undo puts them back with it
    client   TEXT NOT NULL,
    site     TEXT NOT NULL,
    tags     TEXT NOT NULL CHECK (json_type(tags) = 'array'), -- a JSON array of strings
    search   TEXT NOT NULL, -- more words to find the build by, as given
    verdict  TEXT NOT NULL CHECK (verdict IN ('', 'pass', 'tight', 'unknown', 'fail')),
    card     TEXT NOT NULL,
    document TEXT NOT NULL CHECK (document <> ''), -- byte for byte as given, last because it is long
    PRIMARY KEY (build, number)
) STRICT;

CREATE UNIQUE INDEX revisions_step ON revisions (build, step) WHERE step IS NOT NULL;

CREATE TABLE parts (
    id         INTEGER PRIMARY KEY AUTOINCREMENT, -- tells a part from an older one of the same key in the bin
    key        TEXT NOT NULL CHECK (key <> ''), -- what builds call it
    type       TEXT NOT NULL CHECK (type <> ''), -- as in the document
    name       TEXT NOT NULL, -- as in the document, empty when it has none
    document   TEXT NOT NULL CHECK (document <> ''), -- byte for byte as given
    created    INTEGER NOT NULL CHECK (created BETWEEN 0 AND 253402300799999), -- [ms] since 1970, UTC
    updated    INTEGER NOT NULL CHECK (updated BETWEEN 0 AND 253402300799999), -- [ms] since 1970, UTC
    deleted_at INTEGER CHECK (deleted_at BETWEEN 0 AND 253402300799999) -- [ms] since 1970, UTC, NULL unless in the bin
) STRICT;

CREATE UNIQUE INDEX parts_key ON parts (key) WHERE deleted_at IS NULL;
