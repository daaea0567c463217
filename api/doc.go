// Package api is the service over HTTP: the contract (openapi.yaml), the server
// generated from it, thin handlers, and the table that turns errors into RFC
// 9457 problem documents. The command line reads requests and writes answers
// through it too, so that both speak the same JSON.
package api
