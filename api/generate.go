package api

//go:generate go tool -modfile=../.tools/tools.mod oapi-codegen --config oapi-codegen.yaml openapi.yaml
