package api

import (
	"context"
	"io"
	"iter"
	"log/slog"
	"mime"
	"net/http"
	"strconv"
	"time"

	"github.com/labstack/echo/v4"

	"ridgehop/internal/screening/intake"
	"ridgehop/internal/screening/sites"
)

// maxListBytes bounds the body of a list: 200,000 rows of 80 bytes.
const maxListBytes = 16 << 20

// importsAtOnce bounds the lists that are held in memory: the longest takes a
// quarter of a GiB, as measured.
const importsAtOnce = 2

// importRoutes are the operations that take a list, with what checks it first.
func importRoutes() map[string][]echo.MiddlewareFunc {
	places := make(chan struct{}, importsAtOnce)
	return map[string][]echo.MiddlewareFunc{
		"importSitesCsv":     {lists("text/csv"), oneOf(places)},
		"importSitesGeojson": {lists("application/geo+json"), oneOf(places)},
	}
}

// takesList says whether a route takes a list.
func takesList(route string) bool {
	return route == "/v1/sites/import.csv" || route == "/v1/sites/import.geojson"
}

// lists lets bodies of one type pass, up to the size of a list and in the time
// that one takes over a slow line.
func lists(kind string) echo.MiddlewareFunc {
	return func(next echo.HandlerFunc) echo.HandlerFunc {
		return func(c echo.Context) error {
			if err := takes(kind, c.Request().Header); err != nil {
				return err
			}
			if c.Request().ContentLength > maxListBytes {
				return &http.MaxBytesError{Limit: maxListBytes}
			}
			// Not every ResponseWriter can; then the server's own time holds.
			_ = http.NewResponseController(c.Response()).SetReadDeadline(time.Now().Add(requestTime))
			c.Request().Body = http.MaxBytesReader(c.Response(), c.Request().Body, maxListBytes)
			return next(c)
		}
	}
}

// oneOf waits for one of so many places before a body is read.
func oneOf(places chan struct{}) echo.MiddlewareFunc {
	return func(next echo.HandlerFunc) echo.HandlerFunc {
		return func(c echo.Context) error {
			select {
			case places <- struct{}{}:
				defer func() { <-places }()
				return next(c)
			case <-c.Request().Context().Done():
				return c.Request().Context().Err()
			}
		}
	}
}

// takes checks that a body is of a type, and not packed.
func takes(kind string, header http.Header) error {
	given := header.Get(echo.HeaderContentType)
	if is, _, err := mime.ParseMediaType(given); err != nil || is != kind {
		return mediaType.problem("Content-Type is %s; send the body as %s.", strconv.Quote(shortened(given)), kind)
	}
	if packed := header.Get(echo.HeaderContentEncoding); packed != "" {
		return mediaType.problem("Content-Encoding is %s; send the body as it is.", strconv.Quote(shortened(packed)))
	}
	return nil
}

// ImportSitesCsv keeps the sites of a CSV.
func (h *handlers) ImportSitesCsv(ctx context.Context, request ImportSitesCsvRequestObject) (ImportSitesCsvResponseObject, error) {
	list, err := wholeBody(request.Body)
	if err != nil {
		return nil, err
	}
	out, err := h.imported(ctx, list, intake.CSV, string(orZero(request.Params.Existing)))
	return ImportSitesCsv200JSONResponse(out), err
}

// ImportSitesGeojson keeps the sites of a GeoJSON.
func (h *handlers) ImportSitesGeojson(ctx context.Context, request ImportSitesGeojsonRequestObject) (ImportSitesGeojsonResponseObject, error) {
	out, err := h.imported(ctx, *request.Body, intake.GeoJSON, string(orZero(request.Params.Existing)))
	return ImportSitesGeojson200JSONResponse(out), err
}

// imported reads a list and keeps its sites.
func (h *handlers) imported(ctx context.Context, list []byte, format intake.Format, existing string) (SiteImport, error) {
	if existing != "" && !Existing(existing).Valid() {
		return SiteImport{}, badRequest.problem("existing is %q; it may be refuse or replace.", shortened(existing))
	}
	report, err := h.Sites.Import(ctx, list, format, Existing(existing) == ExistingReplace)
	if err != nil {
		return SiteImport{}, err
	}
	return importAnswer(report), nil
}

// maxRowNotes bounds the rows that an answer speaks of one by one.
const maxRowNotes = 1000

func importAnswer(r sites.Report) SiteImport {
	out := SiteImport{
		Created: int32(r.Created), Replaced: int32(r.Replaced), Unchanged: int32(r.Unchanged),
		Problems: []RowNote{}, Warnings: []RowNote{},
	}
	for _, p := range r.Problems[:min(maxRowNotes, len(r.Problems))] {
		out.Problems = append(out.Problems, rowNote(p))
	}
	for _, w := range r.Warnings[:min(maxRowNotes, len(r.Warnings))] {
		out.Warnings = append(out.Warnings, rowNote(intake.RowProblem(w)))
	}
	out.MoreProblems, out.MoreWarnings = moreThanNoted(len(r.Problems)), moreThanNoted(len(r.Warnings))
	return out
}

func moreThanNoted(n int) *int32 {
	if n <= maxRowNotes {
		return nil
	}
	return new(int32(n - maxRowNotes))
}

func rowNote(p intake.RowProblem) RowNote {
	out := RowNote{Line: int32(p.Line), Detail: p.Detail}
	if p.ID != "" {
		out.Id = &p.ID
	}
	if p.Field != "" {
		out.Field = &p.Field
	}
	return out
}

// ExportSitesCsv writes all sites as CSV.
func (h *handlers) ExportSitesCsv(ctx context.Context, _ ExportSitesCsvRequestObject) (ExportSitesCsvResponseObject, error) {
	return h.exported(ctx, "text/csv; charset=utf-8; header=present", "sites.csv", sites.WriteCSV)
}

// ExportSitesGeojson writes all sites as GeoJSON.
func (h *handlers) ExportSitesGeojson(ctx context.Context, _ ExportSitesGeojsonRequestObject) (ExportSitesGeojsonResponseObject, error) {
	return h.exported(ctx, "application/geo+json", "sites.geojson", sites.WriteGeoJSON)
}

// exported reads the first sites, so that what keeps them from being read can
// still be said as a problem.
func (h *handlers) exported(ctx context.Context, kind, file string, write siteWriter) (siteExport, error) {
	_, _, err := h.Sites.Page(ctx, "", 1)
	return siteExport{kind: kind, file: file, write: write, sites: h.Sites.All(ctx), log: h.Log}, err
}

// siteWriter writes sites as a list.
type siteWriter func(io.Writer, iter.Seq2[sites.Site, error]) error

// siteExport is an answer that is written as the sites are read.
type siteExport struct {
	kind, file string
	write      siteWriter
	sites      iter.Seq2[sites.Site, error]
	log        *slog.Logger
}

// answer writes the list. One that breaks off must not look complete, so the
// connection is broken off as well.
func (e siteExport) answer(w http.ResponseWriter) error {
	w.Header().Set("Content-Type", e.kind)
	w.Header().Set("Content-Disposition", `attachment; filename="`+e.file+`"`)
	w.Header().Set("Cache-Control", "no-cache")
	w.WriteHeader(http.StatusOK)
	if err := e.write(w, e.sites); err != nil {
		e.log.Warn("export broken off", "file", e.file, "error", err)
		panic(http.ErrAbortHandler)
	}
	return nil
}

// VisitExportSitesCsvResponse implements ExportSitesCsvResponseObject.
func (e siteExport) VisitExportSitesCsvResponse(w http.ResponseWriter) error { return e.answer(w) }

// VisitExportSitesGeojsonResponse implements ExportSitesGeojsonResponseObject.
func (e siteExport) VisitExportSitesGeojsonResponse(w http.ResponseWriter) error { return e.answer(w) }
