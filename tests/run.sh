#!/bin/sh
# Sets up, builds and runs the tests. `sh tests/run.sh full` adds the other compiler, the sanitizers
# and the linter.
set -eu
top=$(CDPATH='' cd -- "$(dirname -- "$0")/.." && pwd)
cd "$top"

build_and_test() { # NAME CMAKE-OPTIONS...
  name=$1
  shift
  [ -f "build/$name/build.ninja" ] || cmake -S . -B "build/$name" -G Ninja -DCAPSIGH_WERROR=ON "$@"
  cmake --build "build/$name"
  ctest --test-dir "build/$name" --output-on-failure --no-tests=error -j "$(nproc)"
}

# Any bytes as a recipe, for so many seconds, from the shipped recipes on.
fuzz() { # SECONDS
  [ -f build/fuzz/build.ninja ] ||
    cmake -S . -B build/fuzz -G Ninja -DCMAKE_BUILD_TYPE=RelWithDebInfo -DCAPSIGH_FUZZ=ON \
      -DCMAKE_CXX_COMPILER=clang++-14 -DCAPSIGH_SANITIZE=address,undefined
  cmake --build build/fuzz --target capsigh_fuzz
  mkdir -p build/fuzz/corpus
  build/fuzz/tests/capsigh_fuzz -max_total_time="$1" -max_len=4096 -timeout=10 -rss_limit_mb=2048 \
    -dict=tests/fuzz/recipe.dict -print_final_stats=1 -artifact_prefix=build/fuzz/ \
    build/fuzz/corpus scenarios tests/recipes/bad
}

sh tests/setup.sh build test
if [ "${1:-}" = full ]; then
  sh tests/setup.sh full
  build_and_test sanitized -DCMAKE_BUILD_TYPE=RelWithDebInfo -DCAPSIGH_SANITIZE=address,undefined
  build_and_test clang -DCMAKE_BUILD_TYPE=Release -DCMAKE_CXX_COMPILER=clang++-14 \
    -DCAPSIGH_KILLS=200
  fuzz "${CAPSIGH_FUZZ_SECONDS:-60}"
  find src -name '*.cpp' -print0 |
    xargs -0 -n 4 -P "$(nproc)" clang-tidy-14 -p build/clang --quiet --warnings-as-errors='*'
fi
build_and_test release -DCMAKE_BUILD_TYPE=Release
