package store

import (
	"context"
	"database/sql"
	"errors"
	"time"
)

// ErrExists means that the name is taken.
var ErrExists = errors.New("the name is taken")

// KeepEntry keeps a document of a register under a name, or returns ErrExists.
func (s *Store) KeepEntry(ctx context.Context, kind, name string, document []byte) error {
	result, err := s.write.ExecContext(ctx,
		"INSERT INTO register (kind, name, created_at, document) VALUES (?, ?, ?, ?) ON CONFLICT (kind, name) DO NOTHING",
		kind, name, time.Now().UTC().Format(time.RFC3339), document)
	if err != nil {
		return unavailable(err)
	}
	if added, err := result.RowsAffected(); err != nil || added == 1 {
		return err
	}
	return ErrExists
}

// Entry reads a document of a register, or ErrNotFound.
func (s *Store) Entry(ctx context.Context, kind, name string) ([]byte, error) {
	var document []byte
	err := s.read.QueryRowContext(ctx, "SELECT document FROM register WHERE kind = ? AND name = ?", kind, name).Scan(&document)
	switch {
	case errors.Is(err, sql.ErrNoRows):
		return nil, ErrNotFound
	case err != nil:
		return nil, unavailable(err)
	}
	return document, nil
}

// Entries reads every document of a register, by name.
func (s *Store) Entries(ctx context.Context, kind string) (documents [][]byte, err error) {
	rows, err := s.read.QueryContext(ctx, "SELECT document FROM register WHERE kind = ? ORDER BY name", kind)
	if err != nil {
		return nil, unavailable(err)
	}
	defer func() { _ = rows.Close() }()
	for rows.Next() {
		var document []byte
		if err := rows.Scan(&document); err != nil {
			return nil, unavailable(err)
		}
		documents = append(documents, document)
	}
	if err := rows.Err(); err != nil {
		return nil, unavailable(err)
	}
	return documents, nil
}

// DropEntry takes a document of a register away, or returns ErrNotFound.
func (s *Store) DropEntry(ctx context.Context, kind, name string) error {
	result, err := s.write.ExecContext(ctx, "DELETE FROM register WHERE kind = ? AND name = ?", kind, name)
	if err != nil {
		return unavailable(err)
	}
	if gone, err := result.RowsAffected(); err != nil || gone == 1 {
		return err
	}
	return ErrNotFound
}
