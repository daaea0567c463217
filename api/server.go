package api

import (
	"context"
	"log/slog"
	"net/http"
	"time"

	"github.com/labstack/echo/v4"
	"github.com/labstack/echo/v4/middleware"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening/sites"
	"ridgehop/internal/store"
	"ridgehop/internal/telemetry"
)

// Assessor judges links.
type Assessor interface {
	// Assess judges one link. Its errors are those of assess.Service.
	Assess(ctx context.Context, request assess.Request) (*assess.Assessment, error)
	// Stale says why an assessment would rest on other data if it were made now;
	// empty if it would not. The error is what kept that from being told.
	Stale(ctx context.Context, a *assess.Assessment) ([]string, error)
}

// Keeper keeps assessments.
type Keeper interface {
	// KeepAssessment keeps an assessment unless its id is kept already, and
	// returns the answer that is kept; store.ErrUnavailable if it cannot.
	KeepAssessment(ctx context.Context, a store.Assessment) ([]byte, error)
	// Assessment reads one back; store.ErrNotFound if it is not there.
	Assessment(ctx context.Context, id string) (store.Assessment, error)
}

// Lister lists the rasters.
type Lister interface {
	// Rasters lists every raster found, usable or not.
	Rasters(ctx context.Context) ([]assess.Raster, error)
}

// Elevation knows the terrain itself.
type Elevation interface {
	// Heights says how high a place lies: lon from -180 to 180 and lat from -90 to
	// 90 degrees, WGS 84. Its errors are those of assess.Service where the terrain
	// cannot be read.
	Heights(ctx context.Context, lon, lat float64) (assess.Spot, error)
	// Coverage says what part of the earth each source has rasters for.
	Coverage(ctx context.Context) ([]assess.Coverage, error)
	// Reload loads the rasters anew; whoever is under way goes on with those that
	// he began with. If they cannot be loaded those in use stay, and the error says
	// so and why, for people and without folders.
	Reload(ctx context.Context) (assess.RasterChanges, error)
	// Usable is the number of rasters that answers may rest on.
	Usable() int
}

// Dependencies are what the handlers work with. All are needed, and all are
// safe for concurrent use.
type Dependencies struct {
	Assessor  Assessor
	Keeper    Keeper
	Lister    Lister
	Elevation Elevation
	Antennas  Register[assess.Antenna]
	Radios    Register[assess.Radio]
	Sites     *sites.Register
	Health    *telemetry.Health
	Metrics   *telemetry.Metrics
	Log       *slog.Logger
	// MostAtOnce bounds the requests under way; more are refused.
	MostAtOnce int
}

// requestTime bounds the work on one request.
const requestTime = 30 * time.Second

// handlers implements the interface that the contract generates.
type handlers struct {
	Dependencies
}

// NewHandler builds the whole HTTP service.
func NewHandler(contract *Contract, d Dependencies) (http.Handler, error) {
	page, err := contract.page()
	if err != nil {
		return nil, err
	}
	e := echo.New()
	e.HideBanner = true
	e.IPExtractor = echo.ExtractIPDirect()
	e.Binder = binder{contract}
	e.HTTPErrorHandler = answerProblem(d.Log)
	e.Use(identified, watched(d.Log, d.Metrics), recovered(d.Log), limited(d.MostAtOnce, d.Metrics), timed, hardened)
	e.Use(middleware.BodyLimitWithConfig(middleware.BodyLimitConfig{
		Limit: bodyLimit, Skipper: func(c echo.Context) bool { return takesList(c.Path()) },
	}))
	RegisterHandlersWithOptions(e, NewStrictHandler(&handlers{d}, nil), RegisterHandlersOptions{OperationMiddlewares: importRoutes()})
	e.GET("/metrics", echo.WrapHandler(d.Metrics.Handler()))
	e.GET("/openapi.yaml", func(c echo.Context) error { return c.Blob(http.StatusOK, "application/yaml", contractYAML) })
	e.GET("/docs", func(c echo.Context) error { return c.HTMLBlob(http.StatusOK, page) })
	e.GET("/", func(c echo.Context) error { return c.Redirect(http.StatusFound, "/docs") })
	return e, nil
}
