-- A line that holds nothing but a semicolon ends a statement; see store-schema.md for what the tables are for.
PRAGMA application_id = 1163281742
;
CREATE TABLE snapshot (
    sequence        INTEGER PRIMARY KEY CHECK (sequence >= 1),
    kind            TEXT NOT NULL,
    charter         TEXT NOT NULL,
    as_of           TEXT NOT NULL,
    created_at      TEXT NOT NULL,
    previous_sha256 TEXT NOT NULL CHECK (length(previous_sha256) = 64),
    sha256          TEXT NOT NULL CHECK (length(sha256) = 64),
    document        BLOB NOT NULL
) STRICT
;
CREATE TABLE chain_head (
    id       INTEGER PRIMARY KEY CHECK (id = 1),
    sequence INTEGER NOT NULL,
    sha256   TEXT NOT NULL CHECK (length(sha256) = 64)
) STRICT
;
INSERT INTO chain_head (id, sequence, sha256)
VALUES (1, 0, '0000000000000000000000000000000000000000000000000000000000000000')
;
CREATE TRIGGER snapshot_no_update BEFORE UPDATE ON snapshot
BEGIN
    SELECT RAISE(ABORT, 'snapshots are append-only: a stored snapshot is never changed');
END
;
CREATE TRIGGER snapshot_no_delete BEFORE DELETE ON snapshot
BEGIN
    SELECT RAISE(ABORT, 'snapshots are append-only: a stored snapshot is never deleted');
END
;
CREATE TRIGGER snapshot_follows BEFORE INSERT ON snapshot
BEGIN
    SELECT RAISE(ABORT, 'a snapshot must have the sequence after the last one')
    WHERE NEW.sequence IS NOT (SELECT coalesce(max(sequence), 0) + 1 FROM snapshot);
    SELECT RAISE(ABORT, 'a snapshot must carry the hash of the one before it')
    WHERE NEW.previous_sha256 IS NOT coalesce(
        (SELECT sha256 FROM snapshot ORDER BY sequence DESC LIMIT 1),
        '0000000000000000000000000000000000000000000000000000000000000000');
END
;
CREATE TRIGGER chain_head_no_delete BEFORE DELETE ON chain_head
BEGIN
    SELECT RAISE(ABORT, 'the head of the chain is never deleted');
END
;
CREATE TRIGGER chain_head_follows BEFORE UPDATE ON chain_head
BEGIN
    SELECT RAISE(ABORT, 'the head of the chain is the last snapshot')
    WHERE NOT EXISTS (
        SELECT 1 FROM snapshot
        WHERE sequence = NEW.sequence AND sha256 = NEW.sha256
          AND sequence = (SELECT max(sequence) FROM snapshot));
END
;
CREATE TABLE run (
    id             INTEGER PRIMARY KEY,
    identity       TEXT NOT NULL UNIQUE CHECK (length(identity) = 64),
    charter        TEXT NOT NULL,
    epoch          INTEGER NOT NULL,
    id_key         BLOB CHECK (length(id_key) = 16),
    next_offsets   TEXT NOT NULL,
    header         BLOB,
    found_outcomes BLOB,
    sequence       INTEGER UNIQUE REFERENCES snapshot (sequence),
    CHECK ((sequence IS NULL) = (id_key IS NOT NULL))
) STRICT
;
CREATE TABLE bucket (
    run    INTEGER NOT NULL REFERENCES run (id),
    tier   INTEGER NOT NULL,
    start  INTEGER NOT NULL,
    slice  INTEGER NOT NULL,
    packed BLOB NOT NULL,
    PRIMARY KEY (run, tier, start, slice)
) STRICT
;
CREATE TABLE recent_ids (
    run   INTEGER NOT NULL REFERENCES run (id),
    first INTEGER NOT NULL,
    count INTEGER NOT NULL,
    ids   BLOB NOT NULL,
    PRIMARY KEY (run, first)
) STRICT
;
CREATE TABLE rejected (
    run      INTEGER NOT NULL REFERENCES run (id),
    input    INTEGER NOT NULL,
    position INTEGER NOT NULL,
    reason   TEXT NOT NULL,
    bytes    BLOB,
    PRIMARY KEY (run, input, position)
) STRICT, WITHOUT ROWID
;
CREATE TABLE run_log (
    run      INTEGER NOT NULL REFERENCES run (id),
    number   INTEGER NOT NULL,
    position INTEGER NOT NULL,
    kind     TEXT NOT NULL,
    body     TEXT NOT NULL,
    PRIMARY KEY (run, number)
) STRICT, WITHOUT ROWID
;
