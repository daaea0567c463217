package api

import (
	_ "embed"
	"fmt"

	"github.com/getkin/kin-openapi/openapi3"
)

//go:embed openapi.yaml
var contractYAML []byte

// Contract is the OpenAPI document that the server was generated from. It is
// read-only and safe for concurrent use.
type Contract struct {
	doc *openapi3.T
}

// NewContract reads the embedded document.
func NewContract() (*Contract, error) {
	doc, err := openapi3.NewLoader().LoadFromData(contractYAML)
	if err != nil {
		return nil, fmt.Errorf("contract: %w", err)
	}
	return &Contract{doc: doc}, nil
}

// schema is a named schema of the contract.
func (c *Contract) schema(name string) *openapi3.Schema {
	return c.doc.Components.Schemas[name].Value
}
