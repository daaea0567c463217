package store

import (
	"bytes"
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
	return s.documents(ctx, "SELECT document FROM register WHERE kind = ? ORDER BY name", kind)
}

// EntriesAfter reads the first documents of a register whose names come after
// one, at most so many, by name: bytes count, so that Z comes before a. No name
// comes before the empty one.
func (s *Store) EntriesAfter(ctx context.Context, kind, after string, most int) ([][]byte, error) {
	return s.documents(ctx, "SELECT document FROM register WHERE kind = ? AND name > ? ORDER BY name LIMIT ?", kind, after, most)
}

// documents reads what a query finds.
func (s *Store) documents(ctx context.Context, query string, args ...any) (documents [][]byte, err error) {
	rows, err := s.read.QueryContext(ctx, query, args...)
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

// ChangeEntries changes documents of a register in one transaction: all of them,
// or none. For each name in turn change gets the document that is kept, nil if
// there is none, and returns the one to keep from then on: the same leaves it as
// it is, nil takes it away. An error of change leaves everything as it was, and
// is returned. Nobody else writes meanwhile, so change must not call the Store.
func (s *Store) ChangeEntries(ctx context.Context, kind string, names []string, change func(name string, was []byte) (is []byte, err error)) error {
	tx, err := s.write.BeginTx(ctx, nil)
	if err != nil {
		return unavailable(err)
	}
	defer func() { _ = tx.Rollback() }() // does nothing once committed
	e, err := editing(ctx, tx, kind)
	if err != nil {
		return unavailable(err)
	}
	defer e.close()
	for _, name := range names {
		was, err := e.read(ctx, name)
		if err != nil {
			return unavailable(err)
		}
		is, err := change(name, was)
		if err != nil {
			return err
		}
		if err := e.write(ctx, name, was, is); err != nil {
			return unavailable(err)
		}
	}
	if err := tx.Commit(); err != nil {
		return unavailable(err)
	}
	return nil
}

// edit is a transaction on one register, with its statements made ready: a list
// may have many thousand entries.
type edit struct {
	kind               string
	found, kept, taken *sql.Stmt
}

func editing(ctx context.Context, tx *sql.Tx, kind string) (e edit, err error) {
	e.kind = kind
	for text, into := range map[string]**sql.Stmt{
		"SELECT document FROM register WHERE kind = ? AND name = ?":                                                                                       &e.found,
		"INSERT INTO register (kind, name, created_at, document) VALUES (?, ?, ?, ?) ON CONFLICT (kind, name) DO UPDATE SET document = excluded.document": &e.kept,
		"DELETE FROM register WHERE kind = ? AND name = ?":                                                                                                &e.taken,
	} {
		if *into, err = tx.PrepareContext(ctx, text); err != nil { //nolint:sqlclosecheck // closed by close
			e.close()
			return e, err
		}
	}
	return e, nil
}

func (e edit) close() {
	for _, statement := range []*sql.Stmt{e.found, e.kept, e.taken} {
		if statement != nil {
			_ = statement.Close()
		}
	}
}

// read is the document under a name; nil if there is none.
func (e edit) read(ctx context.Context, name string) (document []byte, err error) {
	err = e.found.QueryRowContext(ctx, e.kind, name).Scan(&document)
	if errors.Is(err, sql.ErrNoRows) {
		return nil, nil
	}
	return document, err
}

// write puts a document in place of another; either may be nil.
func (e edit) write(ctx context.Context, name string, was, is []byte) (err error) {
	switch {
	case is != nil && (was == nil || !bytes.Equal(was, is)):
		_, err = e.kept.ExecContext(ctx, e.kind, name, time.Now().UTC().Format(time.RFC3339), is)
	case is == nil && was != nil:
		_, err = e.taken.ExecContext(ctx, e.kind, name)
	}
	return err
}
