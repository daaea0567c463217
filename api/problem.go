package api

import (
	"context"
	"errors"
	"fmt"
	"net/http"
	"strings"

	"github.com/labstack/echo/v4"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening/intake"
	"ridgehop/internal/screening/sites"
	"ridgehop/internal/store"
)

// problemKind is a kind of problem: what a Problem's type, title and status
// say. Its name is part of the contract.
type problemKind struct {
	name   string
	title  string
	status int
	// meaning is what the page of the contract says about it.
	meaning string
}

var (
	malformed   = problemKind{"malformed-json", "The body is not JSON", http.StatusBadRequest, "The body cannot be read as one JSON document; the detail says where."}
	badRequest  = problemKind{"bad-request", "The request cannot be understood", http.StatusBadRequest, "A part of the request other than its body is not what the contract says."}
	notFound    = problemKind{"not-found", "There is nothing here", http.StatusNotFound, "No resource has this address or id."}
	notAllowed  = problemKind{"method-not-allowed", "This cannot be done here", http.StatusMethodNotAllowed, "The resource exists, but not for this method."}
	conflict    = problemKind{"conflict", "This does not go together with what is there", http.StatusConflict, "A name or an id is taken, or an entry is not one's own to take away."}
	changed     = problemKind{"precondition-failed", "This is not what it was", http.StatusPreconditionFailed, "If-Match names another state than the one that is kept: somebody changed it, or took it away. Read it again before changing it. Nothing was changed."}
	tooLarge    = problemKind{"too-large", "The body is too large", http.StatusRequestEntityTooLarge, "The detail names the limit."}
	mediaType   = problemKind{"unsupported-media-type", "The body is of the wrong type", http.StatusUnsupportedMediaType, "Send JSON as application/json; a list as its address says, text/csv or application/geo+json."}
	invalid     = problemKind{"invalid-request", "The request does not hold together", http.StatusUnprocessableEntity, "The errors name each field at fault and what would be right."}
	badList     = problemKind{"unreadable-list", "The list cannot be read", http.StatusUnprocessableEntity, "The list as a whole cannot be read, or not to its end; the detail says where and what would be right. Nothing of it was kept."}
	notReloaded = problemKind{"rasters-not-reloaded", "The rasters could not be loaded anew; those in use stay", http.StatusUnprocessableEntity, "The catalogue or a folder cannot be used as it stands; the detail says what is wrong. Answers go on with the rasters in use."}
	internal    = problemKind{"internal", "Something failed here", http.StatusInternalServerError, "The fault is the server's; its log has the request's id."}
	unreadable  = problemKind{"raster-unreadable", "A raster could not be read", http.StatusServiceUnavailable, "The detail names it. Nothing was judged, since a part of the terrain is missing."}
	unavailable = problemKind{"storage-unavailable", "The answer could not be stored", http.StatusServiceUnavailable, "The data directory is full, read-only or locked; try again when that has changed."}
	overloaded  = problemKind{"overloaded", "Too much at once", http.StatusServiceUnavailable, "Too many requests are under way; try again after the time that Retry-After says."}
	tooSlow     = problemKind{"timed-out", "It took too long", http.StatusServiceUnavailable, "The request was given up after its time limit."}
)

// problemKinds lists them for the page of the contract.
func problemKinds() []problemKind {
	return []problemKind{malformed, badRequest, notFound, notAllowed, conflict, changed, tooLarge, mediaType, invalid, badList, notReloaded, internal, unreadable, unavailable, overloaded, tooSlow}
}

// ProblemError is a problem document as an error.
type ProblemError struct {
	Problem
}

func (e *ProblemError) Error() string { return e.Title + ": " + e.Detail }

func (k problemKind) problem(format string, args ...any) *ProblemError {
	return &ProblemError{Problem{
		Type: "/docs#problem-" + k.name, Title: k.title, Status: int32(k.status), Detail: fmt.Sprintf(format, args...),
	}}
}

// withErrors adds the fields at fault, and says them all in the detail.
func (e *ProblemError) withErrors(fields []FieldError) *ProblemError {
	e.Errors = &fields
	return e
}

// problemOf is the table of errors: what a caller is told for each.
func problemOf(err error) *ProblemError {
	var (
		ready      *ProblemError
		request    *assess.InvalidError
		raster     *assess.UnreadableError
		list       *intake.ListError
		long       *intake.TooManyRowsError
		large      *http.MaxBytesError
		fromRouter *echo.HTTPError
	)
	switch {
	case errors.As(err, &ready):
		return ready
	case errors.As(err, &request):
		return invalid.problem("%s", summary(request.Fields)).withErrors(fieldErrors(request.Fields))
	case errors.As(err, &raster):
		return unreadable.problem("%v", raster)
	case errors.Is(err, assess.ErrNoEntry):
		return notFound.problem("Nothing in the register has this name.")
	case errors.Is(err, store.ErrNotFound):
		return notFound.problem("No assessment has this id.")
	case errors.Is(err, assess.ErrNameTaken), errors.Is(err, assess.ErrNotOwn):
		return conflict.problem("%v.", err)
	case errors.As(err, &list):
		return badList.problem("%v.", list)
	case errors.As(err, &long):
		return badList.problem("%v.", long)
	case errors.As(err, &large):
		return tooLarge.problem("A list may have %d bytes.", large.Limit)
	case errors.Is(err, sites.ErrNoSite):
		return notFound.problem("No site has this id.")
	case errors.Is(err, sites.ErrIDTaken):
		return conflict.problem("The id is that of another site; PUT to its address replaces it.")
	case errors.Is(err, sites.ErrChanged):
		return changed.problem("If-Match does not name the site as it is; GET it again.")
	case errors.Is(err, store.ErrUnavailable):
		return unavailable.problem("%v", err)
	case errors.Is(err, context.Canceled):
		return tooSlow.problem("The caller hung up before the answer was ready.")
	case errors.Is(err, context.DeadlineExceeded):
		return tooSlow.problem("The request was given up after %v.", requestTime)
	case errors.As(err, &fromRouter):
		return routerProblem(fromRouter)
	}
	return internal.problem("The fault is the server's; its log has this request's id.")
}

func routerProblem(err *echo.HTTPError) *ProblemError {
	switch err.Code {
	case http.StatusNotFound:
		return notFound.problem("Nothing has this address; /docs lists what has one.")
	case http.StatusMethodNotAllowed:
		return notAllowed.problem("This address exists, but not for this method; the Allow header says for which.")
	case http.StatusRequestEntityTooLarge:
		return tooLarge.problem("A body may have %d bytes.", maxBodyBytes)
	case http.StatusUnsupportedMediaType:
		return mediaType.problem("Send the request as application/json.")
	case http.StatusBadRequest:
		return badRequest.problem("%s", parameterFault(fmt.Sprint(err.Message)))
	}
	return internal.problem("The fault is the server's; its log has this request's id.")
}

// parameterFault puts the generated server's word about a parameter in ours.
func parameterFault(message string) string {
	after, about := strings.CutPrefix(message, "Invalid format for parameter ")
	name, _, named := strings.Cut(after, ":")
	if !about || !named {
		return message
	}
	return fmt.Sprintf("The parameter %s is missing, or does not read as what /docs says it is.", name)
}

func fieldErrors(fields []assess.FieldError) []FieldError {
	out := make([]FieldError, len(fields))
	for i, f := range fields {
		out[i] = FieldError{Pointer: f.Pointer, Detail: f.Detail}
	}
	return out
}

// summary says the first fault in one line, and how many more there are.
func summary(fields []assess.FieldError) string {
	text := fmt.Sprintf("%s %s", fields[0].Pointer, fields[0].Detail)
	if more := len(fields) - 1; more > 0 {
		text += fmt.Sprintf(" (and %d more)", more)
	}
	return text
}
