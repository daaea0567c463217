package store

import (
	"context"
	"database/sql"
	"embed"
	"errors"
	"fmt"
	"io/fs"
	"net/url"
	"os"
	"path/filepath"

	"github.com/mattn/go-sqlite3"
	"github.com/pressly/goose/v3"
)

//go:embed migrations/*.sql
var migrations embed.FS

// fileName is the database's name in the data directory.
const fileName = "ridgehop.db"

// The errors of a Store.
var (
	// ErrNotFound means that nothing is kept under that id.
	ErrNotFound = errors.New("not found")
	// ErrUnavailable means that the database could not be read or written now:
	// the disk is full, the directory read-only, the file locked.
	ErrUnavailable = errors.New("the data directory cannot be used")
)

// Store is the open database. SQLite has one writer at a time: writes go
// through a connection of their own, so that they queue in the program and not
// in the file's lock; reads do not wait for them.
type Store struct {
	write *sql.DB
	read  *sql.DB
}

// Open opens the database in dir, making both where they are missing, and
// brings its tables up to date. The error is ErrUnavailable with the reason.
func Open(ctx context.Context, dir string) (*Store, error) {
	if err := os.MkdirAll(dir, 0o750); err != nil {
		return nil, unavailable(err)
	}
	path := filepath.Join(dir, fileName)
	write, err := connect(path, "_txlock=immediate")
	if err != nil {
		return nil, err
	}
	write.SetMaxOpenConns(1)
	s := &Store{write: write}
	if err := s.migrate(ctx); err != nil {
		return nil, errors.Join(unavailable(err), s.Close())
	}
	if s.read, err = connect(path, "_query_only=true"); err != nil {
		return nil, errors.Join(err, s.Close())
	}
	return s, nil
}

// connect prepares a pool on the file: write-ahead log, so that readers and
// the writer do not wait for each other; NORMAL, so that a killed process
// loses nothing and only a power cut may lose the last moments.
func connect(path string, option string) (*sql.DB, error) {
	name := "file:" + url.PathEscape(path) + "?_journal_mode=WAL&_synchronous=NORMAL&_busy_timeout=5000&_foreign_keys=true&" + option
	db, err := sql.Open("sqlite3", name)
	if err != nil {
		return nil, unavailable(err)
	}
	return db, nil
}

func (s *Store) migrate(ctx context.Context) error {
	files, err := fs.Sub(migrations, "migrations")
	if err != nil {
		return err
	}
	provider, err := goose.NewProvider(goose.DialectSQLite3, s.write, files)
	if err != nil {
		return err
	}
	_, err = provider.Up(ctx)
	return err
}

// Close closes the database.
func (s *Store) Close() error {
	var errs []error
	for _, db := range []*sql.DB{s.read, s.write} {
		if db != nil {
			errs = append(errs, db.Close())
		}
	}
	return errors.Join(errs...)
}

// Ping reports whether the database answers.
func (s *Store) Ping(ctx context.Context) error {
	var one int
	if err := s.read.QueryRowContext(ctx, "SELECT 1 FROM assessments LIMIT 1").Scan(&one); err != nil && !errors.Is(err, sql.ErrNoRows) {
		return unavailable(err)
	}
	return nil
}

// unavailable wraps whatever the file system or SQLite says. A context's own
// error passes unchanged. A path's place on disk stays out of the message.
func unavailable(err error) error {
	if errors.Is(err, context.Canceled) || errors.Is(err, context.DeadlineExceeded) {
		return err
	}
	if where, ok := errors.AsType[*fs.PathError](err); ok {
		return fmt.Errorf("%w: %w", ErrUnavailable, where.Err)
	}
	if lite, ok := errors.AsType[sqlite3.Error](err); ok {
		return fmt.Errorf("%w: %s", ErrUnavailable, lite.Error())
	}
	return fmt.Errorf("%w: %w", ErrUnavailable, err)
}
