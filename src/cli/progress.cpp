#include "progress.hpp"

#include <fmt/format.h>
#include <unistd.h>

#include <cstdio>

namespace capsigh::cli {

std::function<void(double)> progress(std::string what) {
  if (isatty(STDERR_FILENO) == 0) return {};
  return [what = std::move(what), last = -1](double share) mutable {
    constexpr double percent = 100;
    const int now = static_cast<int>(percent * share);
    if (now == last) return;
    last = now;
    fmt::print(stderr, "\r{} {} %", what, now);
    static_cast<void>(std::fflush(stderr));
  };
}

void end_progress() {
  if (isatty(STDERR_FILENO) == 0) return;
  fmt::print(stderr, "\r\033[K");
  static_cast<void>(std::fflush(stderr));
}

}  // namespace capsigh::cli
