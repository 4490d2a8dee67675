// Package web embeds the browser page and serves it.
//
// The sources of the page are in src and public; `make page` builds them into dist, which is embedded here. web.go says how the files
// are cached and what a browser may load for them; everything that the page shows comes from the API.
package web
