package sites

import (
	"bytes"
	"cmp"
	"context"
	"slices"
	"strings"

	"ridgehop/internal/screening/intake"
)

// MaxImportRows is how many rows a list may have: sites are kept in one
// transaction, during which nothing else is.
const MaxImportRows = 200_000

// Report says what became of a list.
type Report struct {
	// Created, Replaced and Unchanged count sites. Unchanged are those that are
	// kept already as they are.
	Created, Replaced, Unchanged int
	// Problems are the rows that were not kept, by line.
	Problems []intake.RowProblem
	// Warnings are rows that were kept and are worth a look.
	Warnings []intake.Warning
}

// Import reads a list and keeps its sites. Of a site whose id is taken, replace
// puts the new one in its place; without it, that is a problem of its row. Rows
// with problems are left out, the others are kept together or not at all. Errors
// are those of intake.ReadSites, after which nothing is kept, and those of the
// shelf. A list has at most MaxImportRows.
func (r *Register) Import(ctx context.Context, list []byte, format intake.Format, replace bool) (Report, error) {
	read, err := intake.ReadSites(bytes.NewReader(list), format, intake.Options{MaxRows: MaxImportRows})
	if err != nil {
		return Report{}, err
	}
	report := Report{Problems: read.Problems, Warnings: read.Warnings}
	refused := map[string]intake.RowProblem{} // by id, without lines
	good := map[string]intake.Site{}
	ids := make([]string, 0, len(read.Sites))
	for _, site := range read.Sites {
		site = whole(site)
		if faults := validate(site); len(faults) > 0 {
			refused[site.ID] = intake.RowProblem{ID: site.ID, Field: columnOf(faults[0].Pointer), Detail: faults[0].Detail}
			continue
		}
		good[site.ID] = site
		ids = append(ids, site.ID)
	}
	err = r.change(ctx, ids, func(id string, was *Site) (*Site, error) {
		if was != nil && !replace {
			refused[id] = intake.RowProblem{ID: id, Field: "id", Detail: "is taken by a site that is there already; with existing=replace this one takes its place"}
			return was, nil
		}
		is := r.revised(good[id], was)
		report.count(is, was)
		return is, nil
	})
	if err != nil {
		return Report{}, err
	}
	report.add(refused, list, format)
	return report, nil
}

// count counts what becomes of a site.
func (r *Report) count(is, was *Site) {
	switch was {
	case nil:
		r.Created++
	case is:
		r.Unchanged++
	default:
		r.Replaced++
	}
}

// add adds the problems with whole sites, at the lines on which they begin.
func (r *Report) add(refused map[string]intake.RowProblem, list []byte, format intake.Format) {
	if len(refused) == 0 {
		return
	}
	lines := linesOf(list, format, r.Problems)
	for id, problem := range refused {
		problem.Line = lines[id]
		r.Problems = append(r.Problems, problem)
	}
	slices.SortFunc(r.Problems, func(a, b intake.RowProblem) int {
		return cmp.Or(cmp.Compare(a.Line, b.Line), strings.Compare(a.ID, b.ID))
	})
}

// linesOf finds the line on which each site of a list begins: the first of its
// id that is no problem. ReadSites does not tell, so the list is read again, as
// candidates, which need no more than a site does.
func linesOf(list []byte, format intake.Format, problems []intake.RowProblem) map[string]int {
	left := map[int]bool{}
	for _, p := range problems {
		left[p.Line] = true
	}
	lines := map[string]int{}
	for row, err := range intake.Candidates(bytes.NewReader(list), format, intake.Options{MaxRows: MaxImportRows}) {
		if err != nil {
			return lines // not reached: the list was read before
		}
		id := row.Candidate.ID
		if row.Problem != nil { // a second row of the site
			id = row.Problem.ID
		}
		if _, known := lines[id]; !known && !left[row.Line] {
			lines[id] = row.Line
		}
	}
	return lines
}

// columnOf is the column of a field: /sectors/0/width_deg is width_deg.
func columnOf(pointer string) string { return pointer[strings.LastIndexByte(pointer, '/')+1:] }
