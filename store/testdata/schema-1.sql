-- A small shelf and drawer as the program with schema 1 wrote them.
PRAGMA application_id = 1282307170;
PRAGMA foreign_keys = off;
BEGIN TRANSACTION;
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
INSERT INTO "builds" VALUES(1,7,2,0,3,1709208002000,1709208008000,NULL,'tide-table case harbour office ferry waiting room display case white-2835 bc547b','Tide-table case','Harbour office','Ferry waiting room','["display case"]','tight','{"columns":1}');
INSERT INTO "builds" VALUES(2,1,0,0,0,1709208009000,1709208009000,NULL,'grosse 50 % muller  ','Größe 50 %','Müller','','[]','','{"columns":1}');
INSERT INTO "builds" VALUES(3,1,0,0,0,1709208010000,1709208010000,1709208011000,'taken down   ','Taken down','','','[]','fail','{"columns":1}');
CREATE TABLE goose_db_version (
		id INTEGER PRIMARY KEY AUTOINCREMENT,
		version_id INTEGER NOT NULL,
		is_applied INTEGER NOT NULL,
		tstamp TIMESTAMP DEFAULT (datetime('now'))
	);
INSERT INTO "goose_db_version" VALUES(1,0,1,'2026-12-01 13:03:59');
INSERT INTO "goose_db_version" VALUES(2,1,1,'2026-12-01 13:03:59');
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
INSERT INTO "parts" VALUES(1,'bc547b','npn','BC547B','{"type":"npn","name":"BC547B"}',1709208012000,1709208012000,NULL);
INSERT INTO "parts" VALUES(2,'white-2835','led','White 2835','{"type": "led", "name": "White 2835", "test_current": 0.060}',1709208013000,1709208013000,NULL);
INSERT INTO "parts" VALUES(3,'old','led','Old','{"type":"led","name":"Old"}',1709208014000,1709208014000,1709208015000);
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
INSERT INTO "revisions" VALUES(1,1,1709208002000,'edit',0,0,'','Tide-table case','Harbour office','Ferry waiting room','["display case"]','white-2835 bc547b','tight','{"columns":1}','{"title": "Tide-table case",
 "x": 1.50}');
INSERT INTO "revisions" VALUES(1,2,1709208003000,'edit',NULL,1,'as quoted','Tide-table case','Harbour office','Ferry waiting room','["display case"]','white-2835 bc547b','tight','{"columns":1}','{"title": "Tide-table case",
 "x": 1.60}');
INSERT INTO "revisions" VALUES(1,3,1709208004000,'edit',NULL,0,'','Tide-table case','Harbour office','Ferry waiting room','["display case"]','white-2835 bc547b','tight','{"columns":1}','{"title": "Tide-table case",
 "x": 1.70}');
INSERT INTO "revisions" VALUES(1,4,1709208005000,'edit',3,0,'','Tide-table case','Harbour office','Ferry waiting room','["display case"]','white-2835 bc547b','tight','{"columns":1}','{"title": "Tide-table case",
 "x": 1.80}');
INSERT INTO "revisions" VALUES(1,5,1709208006000,'undo',NULL,0,'','Tide-table case','Harbour office','Ferry waiting room','["display case"]','white-2835 bc547b','tight','{"columns":1}','{"title": "Tide-table case",
 "x": 1.70}');
INSERT INTO "revisions" VALUES(1,6,1709208007000,'undo',1,0,'','Tide-table case','Harbour office','Ferry waiting room','["display case"]','white-2835 bc547b','tight','{"columns":1}','{"title": "Tide-table case",
 "x": 1.60}');
INSERT INTO "revisions" VALUES(1,7,1709208008000,'redo',2,0,'','Tide-table case','Harbour office','Ferry waiting room','["display case"]','white-2835 bc547b','tight','{"columns":1}','{"title": "Tide-table case",
 "x": 1.70}');
INSERT INTO "revisions" VALUES(2,1,1709208009000,'edit',0,0,'','Größe 50 %','Müller','','[]','','','{"columns":1}','{"title":"Größe 50 %"}');
INSERT INTO "revisions" VALUES(3,1,1709208010000,'edit',0,0,'','Taken down','','','[]','','fail','{"columns":1}','{"title":"Taken down"}');
CREATE INDEX builds_shelf ON builds (updated DESC, id DESC, folded) WHERE deleted_at IS NULL;
CREATE UNIQUE INDEX revisions_step ON revisions (build, step) WHERE step IS NOT NULL;
CREATE UNIQUE INDEX parts_key ON parts (key) WHERE deleted_at IS NULL;
DELETE FROM "sqlite_sequence";
INSERT INTO "sqlite_sequence" VALUES('goose_db_version',2);
INSERT INTO "sqlite_sequence" VALUES('builds',3);
INSERT INTO "sqlite_sequence" VALUES('parts',3);
COMMIT;
