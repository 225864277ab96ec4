#!/bin/sh
# Sets up, builds and runs the main job on a shipped recipe.
set -eu
top=$(CDPATH='' cd -- "$(dirname -- "$0")/.." && pwd)
cd "$top"
sh tests/setup.sh build
if [ ! -f build/demo/build.ninja ]; then
  cmake -S . -B build/demo -G Ninja -DCMAKE_BUILD_TYPE=Release -DCAPSIGH_TESTS=OFF >&2
fi
cmake --build build/demo >&2
exec build/demo/src/capsigh report "${1:-scenarios/sparkling-water-can.toml}"
