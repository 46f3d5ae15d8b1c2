# make help lists the targets.
GO ?= go
STATICCHECK ?= honnef.co/go/tools/cmd/staticcheck@v0.8.2
FUZZTIME ?= 30s
DEMO := $(or $(TMPDIR),/tmp)/halfspan-demo

.PHONY: help build demo test short lint bench fuzz cover golden errors truth calibrate papers survey clean

help: ## list the targets
	@grep -hE '^[a-z]+:.*## ' $(MAKEFILE_LIST) | sed -E 's/:[^#]*## /\t/' | expand -t 10

build: ## build the program into ./halfspan
	@echo "Building halfspan (the first time with downloads and compiling, some minutes) ..." >&2
	@$(GO) build -o halfspan ./cmd/halfspan

demo: build ## scan the invented papers and print the review table
	@rm -rf $(DEMO) && mkdir -p $(DEMO)
	@echo "Reading the demo papers; one of them is a picture without text, to show how that is said." >&2
	@./halfspan scan --ledger $(DEMO)/halfspan.ledger testdata/papers/*.pdf testdata/papers/*.xml testdata/papers/*.txt || test $$? -eq 3
	@echo "Next: ./halfspan check --ledger $(DEMO)/halfspan.ledger --checker ME" >&2

test: ## all tests
	$(GO) test ./...

short: ## the tests that take no time
	$(GO) test -short ./...

lint: ## formatting, vet and a linter
	@files=$$(gofmt -l cmd extract convert report); test -z "$$files" || { echo "gofmt -w $$files" >&2; exit 1; }
	$(GO) vet ./...
	@if command -v golangci-lint >/dev/null; then golangci-lint run; else $(GO) run $(STATICCHECK) ./...; fi

survey: ## tables seen and read in a folder of real papers, if it is here
	$(GO) test ./extract -run TestSurveyTables -survey -v | grep -v '^===' | sed 's/^ *[a-z_]*test.go:[0-9]*: //'

bench: ## benchmarks, with allocations
	$(GO) test -run '^$$' -bench . -benchmem ./...

fuzz: ## every fuzz target for FUZZTIME (30s)
	@set -e; for p in $$($(GO) list ./...); do \
		for f in $$($(GO) test -list '^Fuzz' $$p | grep '^Fuzz' || true); do \
			echo "$$p $$f"; $(GO) test -run '^$$' -fuzz "^$$f$$" -fuzztime $(FUZZTIME) $$p; \
		done; \
	done

cover: ## how much of the code the tests run
	$(GO) test -coverprofile coverage.out -coverpkg ./... ./...
	$(GO) tool cover -func coverage.out | tail -1

golden: ## write the expected outputs anew; read the difference before committing it
	@set -e; for p in $$(grep -rl 'flag.Bool("update"' --include='*_test.go' . | xargs -n1 dirname | sort -u); do \
		$(GO) test $$p -update; \
	done

errors: ## make the table of the methods' typical errors anew (minutes)
	$(GO) test -run 'TestTypicalErrors$$' -timeout 30m -v ./convert -simulate

truth: ## compare SDs worked out with those printed in the same row, over real papers (minutes)
	$(GO) test -run 'TestTruthRows$$' -timeout 30m -v ./cmd/halfspan -truth

calibrate: ## how often readings of each rating are wholly right, over labelled papers (minutes; HALFSPAN_LABELS=FOLDER=LABELS,... adds sets)
	$(GO) test -run 'TestCalibration$$' -timeout 30m -v ./cmd/halfspan -calibrate | grep -v '^===' | sed 's/^ *[a-z_]*test.go:[0-9]*: //'

papers: ## rebuild the demo papers from their sources
	testdata/papers/sources/build.sh

clean: ## remove what was built and the demo's ledger
	rm -rf halfspan coverage.out $(DEMO)
