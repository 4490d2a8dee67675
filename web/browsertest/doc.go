// Package browsertest drives the real page in a headless Chromium against the real server. It holds tests only.
//
// With TARN_BROWSER_TESTS=require, as `make test` sets it, a missing browser or an unbuilt page fails the tests; otherwise they are
// skipped with a line that says what is missing.
package browsertest
