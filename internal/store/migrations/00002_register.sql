-- +goose Up
CREATE TABLE register (
    kind       TEXT NOT NULL, -- antenna or radio
    name       TEXT NOT NULL,
    created_at TEXT NOT NULL, -- RFC 3339, UTC
    document   BLOB NOT NULL, -- JSON
    PRIMARY KEY (kind, name)
);

-- +goose Down
DROP TABLE register;
