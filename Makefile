# What one does with this tree. Each verb sets up what it needs.
#
#   make demo    build the program and every example; says where the pages are
#   make test    everything that must hold: formatting, vet, all tests, every system
#   make bundle  what the written page carries: scripts, fonts, licences
#   make build   the program, bin/quoin
#   make clean   remove what was made here

.PHONY: demo test systems bundle build clean tools modules
.DEFAULT_GOAL := demo

go_files := find . -name '*.go' -not -path './node_modules/*' -not -path './.git/*'
bundled  := templates/dist/page.js
machines := linux/amd64 linux/arm64 darwin/amd64 darwin/arm64 windows/amd64 windows/arm64

demo: build
	@for f in examples/*/package.md; do \
		[ -f "$$f" ] || { echo "there are no examples" >&2; exit 1; }; \
		bin/quoin build "$$f" || exit; \
	done
	@echo; echo "Open in a browser:"
	@for f in examples/*/package.md; do echo "  $(CURDIR)/$${f%.md}.package/index.html"; done

test: bundle
	@bash .ci/need --if-possible chromium pdftoppm java scipy
	@unformatted=$$($(go_files) -exec gofmt -l {} +); \
		[ -z "$$unformatted" ] || { echo "gofmt would change:" $$unformatted >&2; exit 1; }
	go vet ./...
	@$(MAKE) --no-print-directory systems
	go test -timeout 20m ./...

# Compiles and links for every system that engineers use, and compiles the tests
# for the one that is least like this one.
systems: bundle
	@for s in $(machines); do \
		echo "compiling for $$s"; \
		CGO_ENABLED=0 GOOS=$${s%/*} GOARCH=$${s#*/} go build -o /dev/null ./cmd/quoin || exit; \
	done
	CGO_ENABLED=0 GOOS=windows GOARCH=amd64 go vet ./...

build: bundle
	go build -o bin/quoin ./cmd/quoin

bundle: modules
	@$(MAKE) --no-print-directory $(bundled)

$(bundled): $(wildcard templates/bundle/*) package-lock.json
	node templates/bundle/bundle.mjs
	@touch $@

# Installed only where the lock file is not the one installed last.
modules: tools
	@cmp -s package-lock.json node_modules/.installed-lock || \
		{ npm ci --ignore-scripts --no-audit --no-fund && cp package-lock.json node_modules/.installed-lock; }

tools:
	@bash .ci/need go node npm

clean:
	rm -rf bin node_modules
	find templates/dist -type f ! -name .gitignore -delete
	rm -rf examples/*/*.package
