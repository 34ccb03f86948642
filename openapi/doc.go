// Package openapi is the contract: the OpenAPI document, its JSON form and the
// answer types generated from it.
package openapi
