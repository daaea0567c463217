package api

import (
	"bytes"
	"cmp"
	_ "embed"
	"fmt"
	"html/template"
	"net/http"
	"slices"
	"strings"

	"github.com/getkin/kin-openapi/openapi3"
)

//go:embed page.html.tmpl
var pageTemplate string

// page is the contract as a page for people, which needs no network. It is
// made once.
func (c *Contract) page() ([]byte, error) {
	t, err := template.New("page").Funcs(template.FuncMap{"marked": marked}).Parse(pageTemplate)
	if err != nil {
		return nil, fmt.Errorf("page of the contract: %w", err)
	}
	var out bytes.Buffer
	if err := t.Execute(&out, c.view()); err != nil {
		return nil, fmt.Errorf("page of the contract: %w", err)
	}
	return out.Bytes(), nil
}

// marked sets what stands between backticks as code.
func marked(text string) template.HTML {
	parts := strings.Split(template.HTMLEscapeString(text), "`")
	var out strings.Builder
	for i, part := range parts {
		if i%2 == 1 && i < len(parts)-1 {
			part = "<code>" + part + "</code>"
		}
		out.WriteString(part)
	}
	return template.HTML(out.String()) //nolint:gosec // escaped above
}

// pageView is what the page shows.
type pageView struct {
	Title, Summary, Description string
	Operations                  []operationView
	Schemas                     []schemaView
	Problems                    []problemView
	Codes                       []codeView
}

type codeView struct{ Name, Where, Meaning string }

type operationView struct {
	Method, Path, Summary, Description string
	tag                                string
	Parameters                         []fieldView
	Body                               string
	Responses                          []responseView
}

type responseView struct{ Status, Description, Schema string }

type schemaView struct {
	Name, Description string
	Values            []string
	Fields            []fieldView
}

type fieldView struct {
	Name, Type, Ref, Description string
	Required                     bool
}

type problemView struct {
	Name, Title, Meaning string
	Status               int
}

func (c *Contract) view() pageView {
	v := pageView{Title: c.doc.Info.Title, Summary: c.doc.Info.Summary, Description: c.doc.Info.Description}
	for _, path := range c.doc.Paths.InMatchingOrder() {
		item := c.doc.Paths.Value(path)
		for _, method := range []string{http.MethodGet, http.MethodPost, http.MethodPut, http.MethodDelete} {
			if operation := item.GetOperation(method); operation != nil {
				v.Operations = append(v.Operations, viewOperation(method, path, operation))
			}
		}
	}
	// In the order of the contract's tags, the main job first.
	order := map[string]int{}
	for i, tag := range c.doc.Tags {
		order[tag.Name] = i
	}
	slices.SortStableFunc(v.Operations, func(a, b operationView) int {
		return cmp.Or(cmp.Compare(order[a.tag], order[b.tag]), strings.Compare(a.Path, b.Path), strings.Compare(b.Method, a.Method))
	})
	for _, name := range sortedNames(c.doc.Components.Schemas) {
		v.Schemas = append(v.Schemas, viewSchema(name, c.schema(name)))
	}
	for _, k := range problemKinds() {
		v.Problems = append(v.Problems, problemView{Name: k.name, Title: k.title, Meaning: k.meaning, Status: k.status})
	}
	for _, c := range stableCodes() {
		v.Codes = append(v.Codes, codeView{Name: c.name, Where: string(c.where), Meaning: c.meaning})
	}
	return v
}

func viewOperation(method, path string, o *openapi3.Operation) operationView {
	v := operationView{Method: method, Path: path, Summary: o.Summary, Description: o.Description}
	if len(o.Tags) > 0 {
		v.tag = o.Tags[0]
	}
	for _, p := range o.Parameters {
		f := viewField(p.Value.Name, p.Value.Schema, p.Value.Required)
		f.Description = p.Value.Description
		f.Type += ", in the " + p.Value.In
		v.Parameters = append(v.Parameters, f)
	}
	if o.RequestBody != nil {
		v.Body = schemaOf(o.RequestBody.Value.Content)
	}
	statuses := make([]string, 0, o.Responses.Len())
	for status := range o.Responses.Map() {
		statuses = append(statuses, status)
	}
	slices.Sort(statuses)
	for _, status := range statuses {
		r := o.Responses.Value(status).Value
		v.Responses = append(v.Responses, responseView{Status: status, Description: *r.Description, Schema: schemaOf(r.Content)})
	}
	return v
}

// schemaOf names the schema of a body, if it is one of the contract's own.
func schemaOf(content openapi3.Content) string {
	for _, media := range content {
		if media.Schema != nil && media.Schema.Ref != "" {
			return refName(media.Schema.Ref)
		}
	}
	return ""
}

func refName(ref string) string { return ref[strings.LastIndexByte(ref, '/')+1:] }

func viewSchema(name string, s *openapi3.Schema) schemaView {
	v := schemaView{Name: name, Description: s.Description}
	for _, value := range s.Enum {
		v.Values = append(v.Values, fmt.Sprint(value))
	}
	for _, field := range sortedNames(s.Properties) {
		v.Fields = append(v.Fields, viewField(field, s.Properties[field], slices.Contains(s.Required, field)))
	}
	slices.SortStableFunc(v.Fields, func(a, b fieldView) int {
		switch {
		case a.Required == b.Required:
			return 0
		case a.Required:
			return -1
		}
		return 1
	})
	return v
}

func viewField(name string, ref *openapi3.SchemaRef, required bool) fieldView {
	f := fieldView{Name: name, Required: required, Description: ref.Value.Description}
	if ref.Ref != "" {
		f.Ref = refName(ref.Ref)
		return f
	}
	s := ref.Value
	if len(s.OneOf) > 0 { // a document, or null
		f.Ref, f.Type = refName(s.OneOf[0].Ref), "null or"
		return f
	}
	if s.Type != nil {
		f.Type = strings.Join(s.Type.Slice(), " or ")
	}
	if s.Items != nil {
		if s.Items.Ref != "" {
			f.Ref = refName(s.Items.Ref)
			f.Type = "list of"
		} else if s.Items.Value.Type != nil {
			f.Type = "list of " + strings.Join(s.Items.Value.Type.Slice(), " or ") + "s"
		}
	}
	if s.Min != nil || s.Max != nil {
		f.Type += ", " + rangeWords(s)
	}
	if len(s.Enum) > 0 {
		f.Type = enumWords(s)
	}
	return f
}
