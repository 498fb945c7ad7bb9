# The two commands of the README are `make run` and `make test`. Each is enough on a fresh Debian or Ubuntu machine
# that has Go, make and gcc: what is missing it installs by apt-get, with sudo where needed.

SHELL    := /bin/bash
GO       ?= go
FUZZTIME ?= 20s
BENCH    ?= .

# What the tests need beside Go: a computer algebra system that checks the class functions of every group.
TEST_PACKAGES := gap-core gap-character-tables
TEST_TOOLS    := gap

# The program is stamped with the state of the checkout; -buildvcs would fail in a checkout of another user.
VERSION := $(shell git describe --tags --always --dirty 2>/dev/null || echo devel)
BUILD    = CGO_ENABLED=0 $(GO) build -trimpath -buildvcs=false -ldflags "-X main.version=$(VERSION)"

.PHONY: run build test lint unit fuzz bench packages clean help
.DEFAULT_GOAL := help
.NOTPARALLEL:

help: ## say what can be made
	@grep -hE '^[a-z]+:.*##' $(MAKEFILE_LIST) | sed -E 's/^([a-z]+):.*## /make \1	/' | expand -t 14

run: build ## build the program and draw the demonstration's figures into out/
	./lobewright

build: ## build the command line: ./lobewright
	@echo "== build"
	$(BUILD) -o lobewright ./app

test: packages lint unit build ## check the style, run every test, build the program
	@echo "== all is well"

lint: ## gofmt, go vet, staticcheck
	@echo "== gofmt -s"
	@out=$$("$$($(GO) env GOROOT)/bin/gofmt" -s -l .) || exit 1; \
	if [ -n "$$out" ]; then echo "not as gofmt -s writes them:"; echo "$$out"; exit 1; fi
	@echo "== go vet"
	$(GO) vet ./...
	@echo "== staticcheck"
	$(GO) tool staticcheck ./...

unit: ## every test
	@echo "== go test"
	$(GO) test -timeout 10m ./...

fuzz: ## every fuzz target for FUZZTIME (20s)
	@for p in $$($(GO) list ./...); do \
	  for f in $$($(GO) test -list '^Fuzz' $$p | grep '^Fuzz'); do \
	    echo "== $$p $$f"; $(GO) test -run '^$$' -fuzz "^$$f\$$" -fuzztime $(FUZZTIME) -fuzzminimizetime 1s $$p || exit 1; \
	  done; \
	done

bench: ## every benchmark, or BENCH=name
	@echo "== go test -bench $(BENCH)"
	$(GO) test -run '^$$' -bench '$(BENCH)' -benchmem ./...

# Installs what the tests need. Where there is no apt-get it says what is missing, and goes on if all of it is there.
packages:
	@echo "== packages: $(TEST_PACKAGES)"
	@set -e; missing=; \
	if command -v apt-get >/dev/null && command -v dpkg-query >/dev/null; then \
	  for p in $(TEST_PACKAGES); do \
	    dpkg-query -W -f '$${Status}' $$p 2>/dev/null | grep -q '^install ok installed' || missing="$$missing $$p"; \
	  done; \
	  [ -n "$$missing" ] || exit 0; \
	  root=; if [ "$$(id -u)" != 0 ]; then \
	    command -v sudo >/dev/null || { echo "run as root: apt-get install$$missing"; exit 1; }; root=sudo; \
	  fi; \
	  echo "installing$$missing"; \
	  install="$$root env DEBIAN_FRONTEND=noninteractive apt-get install -y -q --no-install-recommends$$missing"; \
	  $$install || { $$root apt-get update -q && $$install; }; \
	else \
	  for t in $(TEST_TOOLS); do command -v $$t >/dev/null || missing="$$missing $$t"; done; \
	  [ -n "$$missing" ] || exit 0; \
	  echo "not found:$$missing; install GAP 4.12 with its library of character tables (on Debian: $(TEST_PACKAGES))"; \
	  exit 1; \
	fi

clean: ## remove what was built and drawn
	rm -rf lobewright out
