package api

import (
	"context"
	"crypto/rand"
	"encoding/hex"
	"errors"
	"io"
	"log/slog"
	"net/http"
	"reflect"
	"time"

	"github.com/labstack/echo/v4"
	"github.com/labstack/echo/v4/middleware"

	"ridgehop/internal/telemetry"
)

// requestIDHeader carries the id by which the log knows a request.
const requestIDHeader = "Request-Id"

// bodyLimit is maxBodyBytes as the middleware wants it.
const bodyLimit = "4MiB"

// identified gives each request an id.
func identified(next echo.HandlerFunc) echo.HandlerFunc {
	return func(c echo.Context) error {
		var id [8]byte
		_, _ = rand.Read(id[:]) // never fails
		c.Response().Header().Set(requestIDHeader, "rq_"+hex.EncodeToString(id[:]))
		return next(c)
	}
}

// watched logs and counts each request once it is answered.
func watched(log *slog.Logger, metrics *telemetry.Metrics) echo.MiddlewareFunc {
	return func(next echo.HandlerFunc) echo.HandlerFunc {
		return func(c echo.Context) error {
			began := time.Now()
			if err := next(c); err != nil {
				c.Error(err)
			}
			took, status, route := time.Since(began), c.Response().Status, c.Path()
			if route == "" {
				route = "none"
			}
			metrics.Request(c.Request().Method, route, status, took)
			log.Info("request", "method", c.Request().Method, "route", route, "status", status,
				"took_ms", float64(took.Microseconds())/1000, "request_id", c.Response().Header().Get(requestIDHeader))
			return nil
		}
	}
}

// limited refuses requests beyond the number that may be under way at once,
// before their bodies are read. Whoever watches the service is never refused.
func limited(most int, metrics *telemetry.Metrics) echo.MiddlewareFunc {
	places := make(chan struct{}, most)
	return func(next echo.HandlerFunc) echo.HandlerFunc {
		return func(c echo.Context) error {
			switch c.Path() {
			case "/livez", "/readyz", "/metrics":
				return next(c)
			}
			select {
			case places <- struct{}{}:
				defer func() { <-places }()
				return next(c)
			default:
				metrics.Shed()
				c.Response().Header().Set("Retry-After", "1")
				return overloaded.problem("%d requests are under way; try again in a second.", most)
			}
		}
	}
}

// recovered turns a panic into an error of the server, with its stack in the
// log alone.
func recovered(log *slog.Logger) echo.MiddlewareFunc {
	return middleware.RecoverWithConfig(middleware.RecoverConfig{
		DisableStackAll: true,
		LogErrorFunc: func(c echo.Context, err error, stack []byte) error {
			log.Error("panic", "request_id", c.Response().Header().Get(requestIDHeader), "error", err, "stack", string(stack))
			return err
		},
	})
}

// timed ends the work on a request when its time is up.
func timed(next echo.HandlerFunc) echo.HandlerFunc {
	return func(c echo.Context) error {
		ctx, cancel := context.WithTimeout(c.Request().Context(), requestTime)
		defer cancel()
		c.SetRequest(c.Request().WithContext(ctx))
		return next(c)
	}
}

// hardened forbids browsers to guess types or run anything.
func hardened(next echo.HandlerFunc) echo.HandlerFunc {
	return func(c echo.Context) error {
		h := c.Response().Header()
		h.Set("X-Content-Type-Options", "nosniff")
		h.Set("Content-Security-Policy", "default-src 'none'; style-src 'unsafe-inline'; sandbox")
		return next(c)
	}
}

// answerProblem writes whatever went wrong as a problem document.
func answerProblem(log *slog.Logger) echo.HTTPErrorHandler {
	return func(err error, c echo.Context) {
		if c.Response().Committed {
			return
		}
		p := problemOf(err)
		id := c.Response().Header().Get(requestIDHeader)
		if p.Status == http.StatusInternalServerError {
			log.Error("request failed", "request_id", id, "error", err)
		}
		answer := p.Problem
		answer.RequestId = &id
		path := c.Request().URL.Path
		answer.Instance = &path
		c.Response().Header().Set(echo.HeaderContentType, "application/problem+json")
		if c.Request().Method == http.MethodHead {
			_ = c.NoContent(int(answer.Status))
			return
		}
		_ = c.JSON(int(answer.Status), answer)
	}
}

// binder reads request bodies for the generated server, by the contract.
type binder struct {
	contract *Contract
}

// Bind implements echo.Binder.
func (b binder) Bind(into any, c echo.Context) error {
	if list, ok := into.(*SiteCollection); ok { // of ImportSitesGeojson
		body, err := wholeBody(c.Request().Body)
		*list = body
		return err
	}
	schema := map[reflect.Type]string{
		reflect.TypeFor[*CreateAssessmentJSONRequestBody](): "AssessmentRequest",
		reflect.TypeFor[*CreateAntennaJSONRequestBody]():    "Antenna",
		reflect.TypeFor[*CreateRadioJSONRequestBody]():      "Radio",
		reflect.TypeFor[*SiteRequest]():                     "SiteRequest", // of CreateSite and PutSite
	}[reflect.TypeOf(into)]
	if schema == "" {
		return errors.New("a body that the contract does not know")
	}
	if err := takes(echo.MIMEApplicationJSON, c.Request().Header); err != nil {
		return err
	}
	body, err := wholeBody(c.Request().Body)
	if err != nil {
		return err
	}
	return b.contract.decode(schema, body, into)
}

// wholeBody reads a body to its end. One over its limit is the error of who set
// it.
func wholeBody(r io.Reader) ([]byte, error) {
	body, err := io.ReadAll(r)
	_, tooLong := errors.AsType[*echo.HTTPError](err)
	_, tooLongList := errors.AsType[*http.MaxBytesError](err)
	if err != nil && !tooLong && !tooLongList {
		return nil, badRequest.problem("The body broke off before its end.")
	}
	return body, err
}
