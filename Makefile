# Targets: run, test, build, bench, lint, verify, page, clean. A newcomer needs `make run` and `make test`.
SHELL       := /bin/bash
.SHELLFLAGS := -o pipefail -c

GO        ?= go
NPM       ?= npm
LISTEN    ?= 127.0.0.1:8418
DATA      ?= ./data
PAGE_SRC  := $(shell find web/src web/public web/index.html web/package.json web/vite.config.ts -type f 2>/dev/null)

BROWSERS  := chromium chromium-browser google-chrome chromium-headless-shell

.PHONY: run test build bench lint verify page clean tools browser

run: build
	@mkdir -p $(DATA)
	./bin/tarn serve --demo --listen $(LISTEN) --data $(DATA)

build: page
	$(GO) build -o bin/tarn ./server/tarn

test: tools page browser
	cd web && $(NPM) run --silent check && $(NPM) test --silent
	$(GO) vet ./...
	@if command -v $(BROWSERS) >/dev/null || [ -n "$$CI" ]; then export TARN_BROWSER_TESTS=require; \
	else echo "Chromium is missing: the page tests are left out. Install the package chromium to run them."; fi; \
	$(GO) test -timeout 30m ./...

# Installs the browser of the page tests where that takes no question: as root on a Debian system.
browser:
	@command -v $(BROWSERS) >/dev/null || [ "$$(id -u)" != 0 ] || ! command -v apt-get >/dev/null || { \
	apt-get update -qq && DEBIAN_FRONTEND=noninteractive apt-get install -y -qq --no-install-recommends chromium fonts-liberation >/dev/null || echo "Chromium could not be installed"; }

bench: tools
	$(GO) test -timeout 4h -run '^$$' -bench . -benchmem ./...

lint: tools
	$(GO) vet ./...
	$(GO) tool staticcheck ./...
	@test -z "$$($(GO) tool gofumpt -l $$(git ls-files '*.go'))" || { echo "not formatted:"; $(GO) tool gofumpt -l $$(git ls-files '*.go'); exit 1; }
	@! grep -qE 'https?://' web/package-lock.json || { echo "web/package-lock.json holds addresses"; exit 1; }

# The long checks against published values; prints one table, kept in docs/verification.md.
verify: tools
	TARN_VERIFY=1 $(GO) test -timeout 4h -count 1 -v -run 'Verify' ./... | tee verify.log | grep -E '^(---|===|ok|FAIL|\s+---|\|)'

page: web/dist/index.html

web/dist/index.html: web/node_modules/.package-lock.json $(PAGE_SRC)
	cd web && $(NPM) run --silent build
	@touch $@

web/node_modules/.package-lock.json: web/package-lock.json
	cd web && $(NPM) ci --ignore-scripts --no-audit --no-fund
	@touch $@

tools:
	@command -v $(GO) >/dev/null || { echo "Go 1.26 or newer is missing (https://go.dev/dl)"; exit 1; }
	@command -v $(NPM) >/dev/null || { echo "Node.js 20.19 or newer with npm is missing (https://nodejs.org)"; exit 1; }

clean:
	rm -rf bin web/node_modules web/dist/assets web/dist/index.html verify.log
