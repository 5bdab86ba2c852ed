# What a contributor needs: make test (everything CI holds against a change), make bench, make golden.
SHELL := /bin/bash
GO ?= go
STATICCHECK := honnef.co/go/tools/cmd/staticcheck@v0.8.2
export GOFLAGS ?= -buildvcs=false

.PHONY: test tools lint unit race cross bench hot compare golden fuzz build

build:
	$(GO) build -trimpath -o sashlog ./cmd/sashlog

# test installs what the tests need and runs them all. Without root on Debian it names what is missing; those tests are then
# skipped with a message, and CI counts a skip as a failure (SASHLOG_REQUIRE_TOOLS=1).
test: tools lint unit race cross

tools:
	@bash testdata/tools.sh

lint:
	@bad=$$(gofmt -l .); if [ -n "$$bad" ]; then echo "not gofmt-clean:"; echo "$$bad"; exit 1; fi
	$(GO) vet ./...
	$(GO) run $(STATICCHECK) ./...

unit:
	$(GO) test -timeout 20m ./...

# race runs the packages that share work between goroutines, on small inputs.
race:
	$(GO) test -race -short -timeout 20m ./ingest ./ingest/grid ./ingest/logfile ./ingest/tabular ./ingest/sheet \
		./ingest/sources ./ingest/influx ./report/folder ./cmd/sashlog

# cross builds the other systems, without running them.
cross:
	GOOS=windows GOARCH=amd64 $(GO) build -trimpath -o /dev/null ./cmd/sashlog
	GOOS=darwin GOARCH=arm64 $(GO) build -trimpath -o /dev/null ./cmd/sashlog

# bench runs the benchmarks of the hot paths, then compares reading and the whole audit with general-purpose engines, as
# pairs in one run (3 GB in .cache/bench, about 10 minutes; bench/README.md).
bench: hot compare

hot:
	$(GO) test -run '^$$' -bench . -benchmem ./...

compare:
	bench/compare.sh

# golden writes the golden files anew; look at the difference before keeping it.
golden:
	$(GO) test ./report/... ./cmd/sashlog -update

# fuzz runs every fuzz target for FUZZTIME.
FUZZTIME ?= 30s
fuzz:
	@set -e; for pkg in $$($(GO) list ./...); do \
	  for target in $$($(GO) test -list '^Fuzz' $$pkg | grep '^Fuzz' || true); do \
	    echo "$$pkg $$target"; $(GO) test -run '^$$' -fuzz "^$$target$$" -fuzztime $(FUZZTIME) -fuzzminimizetime 5x $$pkg; done; done
