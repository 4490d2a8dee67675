// Package api serves Tarn over HTTP: routes, their request and response types, problem documents (RFC 9457), downloads, server-sent
// events and the OpenAPI document, which follows from the types.
//
// It talks to the queue and the store through the small interfaces in handler.go. jobs.go, molecules.go, minima.go and events.go hold
// one resource each; problems.go is the one place where errors become statuses; guard.go holds what all requests pass through. A new
// route is a function beside them, registered in handler.go, with its success and its failures in the route tests.
package api
