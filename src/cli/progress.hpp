// Progress of a long run, on a terminal only.
#pragma once

#include <functional>
#include <string>

namespace capsigh::cli {

/// Shows "WHAT 34 %" on standard error while it is a terminal; empty (nothing to call) otherwise.
std::function<void(double)> progress(std::string what);

/// Takes the line away again.
void end_progress();

}  // namespace capsigh::cli
