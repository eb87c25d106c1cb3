# The menu of commands. Everything works from a bare checkout on Debian with Rust (rustup), Node 20 and root.
SHELL := bash
.SHELLFLAGS := -euo pipefail -c
.DEFAULT_GOAL := menu
.DELETE_ON_ERROR:

TARGET := $(or $(CARGO_TARGET_DIR),target)
CORE := $(TARGET)/wasm32-unknown-unknown/release/wasm.wasm
CLI := $(TARGET)/quick/sunreach
BINDINGS := web/bindings/target/debug/bindings
PORT ?= 8017

.PHONY: menu build run test lint test-native test-page test-browser bench clean core page browsers

menu: ## print this menu
	@awk -F ':.*## ' '/^[a-z-]+:.*## / { printf "make %-13s %s\n", $$1, $$2 }' $(MAKEFILE_LIST)

build: page ## build dist/sunreach.html, dist/site and the command line, which then says the default flight
	cargo build --locked --quiet --profile quick --package cli
	@$(CLI) solve --pretty '' | sed -n 1p

run: build ## build, then serve the page on 127.0.0.1 (PORT=8017, or the next free one)
	@node web/serve.mjs $(PORT)

test: lint test-native test-page test-browser ## every check there is

lint: ## formatting and lints
	cargo fmt --all --check
	cargo fmt --manifest-path web/bindings/Cargo.toml --check
	cargo clippy --locked --quiet --workspace --all-targets -- -D warnings

test-native: ## the Rust tests
	cargo test --locked --workspace

test-page: page ## types, page units, and the core's boundary in WASM under Node
	cargo build --locked --quiet --profile quick --package cli
	cd web && npx --no-install tsc --project .
	SUNREACH=$(CLI) node --test tests/page/unit/*.test.mjs tests/page/boundary/*.test.mjs

test-browser: page browsers ## the page in Chromium and Firefox, from the file and served
	node --test --test-concurrency=1 tests/page/browser/*.test.mjs

bench: page browsers ## criterion benchmarks, then the page's own measurements
	cargo bench --locked --workspace
	node web/bench.mjs

clean: ## remove everything that was built or installed here
	cargo clean --quiet
	rm -rf dist web/pkg web/node_modules web/bindings/target

# The core for the page. Cargo decides whether anything changed; the later steps look at the file's age.
core:
	rustup target list --installed | grep -qx wasm32-unknown-unknown || rustup target add wasm32-unknown-unknown
	cargo build --locked --quiet --release --package wasm --target wasm32-unknown-unknown

page: core web/node_modules/.package-lock.json
	@$(MAKE) --no-print-directory web/pkg/core.wasm
	cd web && node build.mjs

# The tool refuses to run when its version is not that of wasm-bindgen in Cargo.lock.
web/pkg/core.wasm: $(CORE) $(BINDINGS) Cargo.lock
	$(BINDINGS) $(CORE) web/pkg Cargo.lock
	web/node_modules/.bin/wasm-opt -O3 --enable-simd --enable-bulk-memory --enable-nontrapping-float-to-int \
	  --enable-sign-ext --enable-mutable-globals --enable-reference-types --enable-multivalue \
	  web/pkg/wasm_bg.wasm -o $@

$(BINDINGS): web/bindings/Cargo.toml web/bindings/Cargo.lock web/bindings/src/main.rs
	cargo build --locked --quiet --manifest-path web/bindings/Cargo.toml --target-dir web/bindings/target
	@touch $@

web/node_modules/.package-lock.json: web/package.json web/package-lock.json
	cd web && npm ci
	@touch $@

browsers:
	@command -v chromium >/dev/null && command -v firefox-esr >/dev/null || \
	  { apt-get update && DEBIAN_FRONTEND=noninteractive apt-get install --yes --no-install-recommends chromium firefox-esr fonts-dejavu-core; }
