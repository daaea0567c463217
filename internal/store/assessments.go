package store

import (
	"context"
	"database/sql"
	"errors"
	"time"
)

// Assessment is an assessment as it is kept. It never changes.
type Assessment struct {
	ID     string
	Answer []byte // as it was first given
	Record []byte // with all that a drawing or a table of samples needs
}

// KeepAssessment keeps the assessment, unless one of its id is kept already,
// and returns the answer that is kept. Once it returns, the answer outlives
// the process.
func (s *Store) KeepAssessment(ctx context.Context, a Assessment) (answer []byte, err error) {
	result, err := s.write.ExecContext(ctx,
		"INSERT INTO assessments (id, created_at, answer, record) VALUES (?, ?, ?, ?) ON CONFLICT (id) DO NOTHING",
		a.ID, time.Now().UTC().Format(time.RFC3339), a.Answer, a.Record)
	if err != nil {
		return nil, unavailable(err)
	}
	if added, err := result.RowsAffected(); err != nil || added == 1 {
		return a.Answer, err
	}
	kept, err := s.Assessment(ctx, a.ID)
	return kept.Answer, err
}

// Assessment reads an assessment, or ErrNotFound.
func (s *Store) Assessment(ctx context.Context, id string) (Assessment, error) {
	a := Assessment{ID: id}
	err := s.read.QueryRowContext(ctx, "SELECT answer, record FROM assessments WHERE id = ?", id).Scan(&a.Answer, &a.Record)
	switch {
	case errors.Is(err, sql.ErrNoRows):
		return a, ErrNotFound
	case err != nil:
		return a, unavailable(err)
	}
	return a, nil
}
