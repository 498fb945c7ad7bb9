# The two commands of the README are `make run` and `make test`. Each is enough on a fresh Debian or Ubuntu machine
# that has Go, make and gcc: what is missing it installs by apt-get, with sudo where needed.

SHELL    := /bin/bash
GO       ?= go
FUZZTIME ?= 20s
BENCH    ?= .

# The window needs a C compiler and the headers of OpenGL and X11; the command line needs neither.
WINDOW_PACKAGES  := gcc pkg-config libgl1-mesa-dev xorg-dev libgl1-mesa-dri
WINDOW_LIBRARIES := gl x11 xcursor xi xinerama xrandr xxf86vm
WINDOW_THERE     := pkg-config --exists $(WINDOW_LIBRARIES)
# The tests need a computer algebra system, which checks the class functions of every group, a display in memory with a
# hand that moves its mouse and types, and general readers of the files that the program writes.
TEST_PACKAGES := gap-core gap-character-tables xvfb xdotool poppler-utils librsvg2-bin ffmpeg pngcheck imagemagick
TEST_PROGRAMS := gap Xvfb xdotool pdftoppm rsvg-convert ffprobe pngcheck identify
TEST_THERE    := command -v $(TEST_PROGRAMS) | wc -l | grep -qx $(words $(TEST_PROGRAMS))
# The validator of GLB files comes from npm, where there is one; without it that test is skipped.
VALIDATOR     := gltf-validator@2.0.0-dev.3.10

# The program is stamped with the state of the checkout; -buildvcs would fail in a checkout of another user. No flag here
# changes how packages are compiled, so that tests and program share the toolkit, which takes minutes.
VERSION := $(shell git describe --tags --always --dirty 2>/dev/null || echo devel)
BUILD    = $(GO) build -buildvcs=false -ldflags "-X main.version=$(VERSION)"

# Where make install puts things. DESTDIR stands before it in the making of packages.
PREFIX ?= /usr/local
SHARE   = $(DESTDIR)$(PREFIX)/share
ICONS  := 16 32 48 64 128 256 512

.PHONY: run build test lint unit fuzz bench packages install uninstall clean help
.DEFAULT_GOAL := help
.NOTPARALLEL:

help: ## say what can be made
	@grep -hE '^[a-z]+:.*##' $(MAKEFILE_LIST) | sed -E 's/^([a-z]+):.*## /make \1	/' | expand -t 14

run: ## build the program and start it; without a display it draws the demonstration's figures into out/
	@$(call ensure,$(WINDOW_PACKAGES),$(WINDOW_THERE)) && cgo=1 || { cgo=0; echo "without them there is no window, only the command line"; }; \
	echo "== build"; CGO_ENABLED=$$cgo $(BUILD) -o lobewright ./app
	./lobewright

build: ## build the command line alone, which needs no C compiler: ./lobewright
	@echo "== build"
	CGO_ENABLED=0 $(BUILD) -o lobewright ./app

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

# Elsewhere the tests of the real window are skipped where there is no display in memory, but not here.
unit: ## every test
	@echo "== go test"
	LOBEWRIGHT_NEEDS_DISPLAY=1 LOBEWRIGHT_NEEDS_GAP=1 LOBEWRIGHT_NEEDS_READERS=1 $(GO) test -timeout 15m ./...
	@echo "== go test -race, where several goroutines share state"
	$(GO) test -race -timeout 15m ./app/study/... ./app/work ./app/session

fuzz: ## every fuzz target for FUZZTIME (20s)
	@for p in $$($(GO) list ./...); do \
	  for f in $$($(GO) test -list '^Fuzz' $$p | grep '^Fuzz'); do \
	    echo "== $$p $$f"; $(GO) test -run '^$$' -fuzz "^$$f\$$" -fuzztime $(FUZZTIME) -fuzzminimizetime 1s $$p || exit 1; \
	  done; \
	done

bench: ## every benchmark, or BENCH=name
	@echo "== go test -bench $(BENCH)"
	$(GO) test -run '^$$' -bench '$(BENCH)' -benchmem ./...

# $(call ensure,PACKAGES,TEST) installs the packages that are missing. Where there is no apt-get, or it fails, the shell
# command TEST decides whether all is there; if not, it says what to install.
define ensure
{ echo "== packages: $(1)"; missing=; \
  if command -v apt-get >/dev/null && command -v dpkg-query >/dev/null; then \
    for p in $(1); do \
      dpkg-query -W -f '$${Status}' $$p 2>/dev/null | grep -q '^install ok installed' || missing="$$missing $$p"; \
    done; \
    if [ -n "$$missing" ]; then \
      root=; [ "$$(id -u)" = 0 ] || root=sudo; \
      install="$$root env DEBIAN_FRONTEND=noninteractive apt-get install -y -q --no-install-recommends$$missing"; \
      echo "$$install"; \
      $$install || { $$root apt-get update -q && $$install; }; \
    fi; \
  fi; \
  $(2) || { echo "missing: install what Debian has in the packages $(1)"; false; }; }
endef

packages:
	@$(call ensure,$(TEST_PACKAGES),$(TEST_THERE))
	@test -d .tools/node_modules/gltf-validator || { command -v npm >/dev/null && \
	npm install --prefix .tools --no-save --no-audit --no-fund --silent $(VALIDATOR); } || \
	echo "npm cannot install $(VALIDATOR); the test that needs it is skipped"
	@$(call ensure,$(WINDOW_PACKAGES),$(WINDOW_THERE))

install: ## build with the window and install for all users: program, manual page, shell completions, desktop entry, icons
	@$(call ensure,$(WINDOW_PACKAGES),$(WINDOW_THERE)) && cgo=1 || { cgo=0; echo "without them there is no window, only the command line"; }; \
	echo "== build"; CGO_ENABLED=$$cgo $(BUILD) -o lobewright ./app
	install -D -m 755 lobewright $(DESTDIR)$(PREFIX)/bin/lobewright
	install -d $(SHARE)/man/man1 $(SHARE)/bash-completion/completions $(SHARE)/zsh/site-functions $(SHARE)/fish/vendor_completions.d
	./lobewright manual > $(SHARE)/man/man1/lobewright.1
	./lobewright completion bash > $(SHARE)/bash-completion/completions/lobewright
	./lobewright completion zsh > $(SHARE)/zsh/site-functions/_lobewright
	./lobewright completion fish > $(SHARE)/fish/vendor_completions.d/lobewright.fish
	install -D -m 644 assets/desktop/lobewright.desktop $(SHARE)/applications/lobewright.desktop
	install -D -m 644 assets/desktop/lobewright.metainfo.xml $(SHARE)/metainfo/example.lobewright.Lobewright.metainfo.xml
	install -D -m 644 assets/desktop/lobewright.xml $(SHARE)/mime/packages/lobewright.xml
	install -D -m 644 assets/desktop/lobewright.svg $(SHARE)/icons/hicolor/scalable/apps/lobewright.svg
	for n in $(ICONS); do install -D -m 644 assets/desktop/lobewright-$$n.png $(SHARE)/icons/hicolor/$${n}x$$n/apps/lobewright.png || exit 1; done
	@$(call refresh)

uninstall: ## remove what install put there
	rm -f $(DESTDIR)$(PREFIX)/bin/lobewright $(SHARE)/man/man1/lobewright.1 $(SHARE)/bash-completion/completions/lobewright \
	  $(SHARE)/zsh/site-functions/_lobewright $(SHARE)/fish/vendor_completions.d/lobewright.fish $(SHARE)/applications/lobewright.desktop \
	  $(SHARE)/metainfo/example.lobewright.Lobewright.metainfo.xml $(SHARE)/mime/packages/lobewright.xml \
	  $(SHARE)/icons/hicolor/scalable/apps/lobewright.svg $(foreach n,$(ICONS),$(SHARE)/icons/hicolor/$(n)x$(n)/apps/lobewright.png)
	@$(call refresh)

# The desktop keeps lists of what is installed; a package's own scripts make them anew where DESTDIR is set.
define refresh
if [ -z "$(DESTDIR)" ]; then \
  ! command -v update-desktop-database >/dev/null || update-desktop-database -q $(SHARE)/applications; \
  ! command -v update-mime-database >/dev/null || update-mime-database $(SHARE)/mime; \
  ! command -v gtk-update-icon-cache >/dev/null || gtk-update-icon-cache -q -t $(SHARE)/icons/hicolor; \
fi || true
endef

clean: ## remove what was built and drawn
	rm -rf lobewright out
