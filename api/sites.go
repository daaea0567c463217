package api

import (
	"context"
	"encoding/base64"
	"net/http"
	"strings"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening/sites"
)

// defaultPageSize and maxPageSize are how many sites a page has.
const (
	defaultPageSize = 200
	maxPageSize     = 1000
)

// ListSites gives one page of the sites.
func (h *handlers) ListSites(ctx context.Context, request ListSitesRequestObject) (ListSitesResponseObject, error) {
	size := defaultPageSize
	if asked := request.Params.PageSize; asked != nil {
		size = int(*asked)
	}
	if size < 1 || size > maxPageSize {
		return nil, badRequest.problem("page_size is %d; it must be 1 to %d.", size, maxPageSize)
	}
	after, err := pageAfter(request.Params.PageToken)
	if err != nil {
		return nil, err
	}
	page, more, err := h.Sites.Page(ctx, after, size)
	if err != nil {
		return nil, err
	}
	out := SiteList{Sites: make([]Site, len(page))}
	for i, s := range page {
		out.Sites[i] = same[Site](s)
	}
	if more {
		out.NextPageToken = new(pageToken(page[len(page)-1].ID))
	}
	return ListSites200JSONResponse(out), nil
}

// pageToken stands for the page after an id. Whoever makes one up gets the sites
// after some id, which he may read anyway.
func pageToken(id string) string { return base64.RawURLEncoding.EncodeToString([]byte(id)) }

// pageAfter is the id of a token; the empty one is before every other.
func pageAfter(token *string) (id string, err error) {
	if token == nil {
		return "", nil
	}
	raw, err := base64.RawURLEncoding.Strict().DecodeString(*token)
	if err != nil || !sites.ValidID(string(raw)) {
		return "", badRequest.problem("page_token is not one that a page of sites came with; begin again without it.")
	}
	return string(raw), nil
}

// CreateSite adds a site.
func (h *handlers) CreateSite(ctx context.Context, request CreateSiteRequestObject) (CreateSiteResponseObject, error) {
	kept, err := h.Sites.Create(ctx, asked(*request.Body))
	if err != nil {
		return nil, err
	}
	return siteContent(kept, true)
}

// GetSite reads a site.
func (h *handlers) GetSite(ctx context.Context, request GetSiteRequestObject) (GetSiteResponseObject, error) {
	kept, err := h.Sites.Get(ctx, request.Id)
	if err != nil {
		return nil, err
	}
	out, err := siteContent(kept, false)
	out.known = request.Params.IfNoneMatch
	return out, err
}

// PutSite replaces a site or adds it.
func (h *handlers) PutSite(ctx context.Context, request PutSiteRequestObject) (PutSiteResponseObject, error) {
	if request.Body.Id != request.Id {
		return nil, &assess.InvalidError{Fields: []assess.FieldError{{
			Pointer: "/id", Detail: "is not the id in the address; they must agree",
		}}}
	}
	kept, created, err := h.Sites.Put(ctx, asked(*request.Body), ifMatch(request.Params.IfMatch))
	if err != nil {
		return nil, err
	}
	return siteContent(kept, created)
}

// DeleteSite takes a site away.
func (h *handlers) DeleteSite(ctx context.Context, request DeleteSiteRequestObject) (DeleteSiteResponseObject, error) {
	return DeleteSite204Response{}, h.Sites.Drop(ctx, request.Id, ifMatch(request.Params.IfMatch))
}

// siteContent is the answer of one site.
func siteContent(s sites.Site, created bool) (content, error) {
	body, err := encoded(same[Site](s))
	out := content{status: http.StatusOK, kind: "application/json", body: body}
	if created {
		out.status, out.location = http.StatusCreated, "/v1/sites/"+s.ID
	}
	return out, err
}

// ifMatch is the condition of an If-Match (RFC 9110 13.1.1); nil without one. A
// site has the ETag of its answer. The comparison is strong, so that a weak tag
// never matches.
func ifMatch(header *string) sites.Condition {
	if header == nil {
		return nil
	}
	return func(kept *sites.Site) bool {
		if kept == nil {
			return false
		}
		if strings.TrimSpace(*header) == "*" {
			return true
		}
		now, err := siteContent(*kept, false)
		if err != nil {
			return false
		}
		for candidate := range strings.SplitSeq(*header, ",") {
			if strings.TrimSpace(candidate) == now.etag() {
				return true
			}
		}
		return false
	}
}

// VisitCreateSiteResponse implements CreateSiteResponseObject.
func (c content) VisitCreateSiteResponse(w http.ResponseWriter) error { return c.write(w) }

// VisitGetSiteResponse implements GetSiteResponseObject.
func (c content) VisitGetSiteResponse(w http.ResponseWriter) error { return c.write(w) }

// VisitPutSiteResponse implements PutSiteResponseObject.
func (c content) VisitPutSiteResponse(w http.ResponseWriter) error { return c.write(w) }
