#!/usr/bin/env sh
# Make both lock files anew: every version pinned by hash, for every platform, without addresses. Needs uv.
set -eu
cd "$(dirname "$0")/.."
lock() { uv pip compile --quiet --universal --python-version 3.11 --generate-hashes --no-emit-index-url --no-annotate --no-header --no-emit-find-links "$@"; }
lock pyproject.toml --extra build -o requirements.lock
lock pyproject.toml --extra build --extra test -o tests/requirements.lock
