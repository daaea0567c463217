-- +goose Up
CREATE TABLE assessments (
    id         TEXT PRIMARY KEY,
    created_at TEXT NOT NULL, -- RFC 3339, UTC
    answer     BLOB NOT NULL, -- the JSON as it was first given
    record     BLOB NOT NULL  -- the assessment with its samples
);

-- +goose Down
DROP TABLE assessments;
