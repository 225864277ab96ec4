// What the commands share: exit statuses, messages, and a recipe put together from its files.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "capsigh/document/document.hpp"
#include "capsigh/quantity/finding.hpp"

namespace capsigh::cli {

enum Exit : int { done = 0, out_of_tolerance = 1, bad_input = 2, system_failed = 3 };

/// Prints findings to standard error and returns the status.
int fail(const Findings& findings, int status);

/// What stands around a recipe: shared files laid under it, single keys set over it.
struct RecipeArguments {
  std::vector<std::string> with;
  std::vector<std::string> sets;
};

/// A recipe as one document, or why there is none and the status to exit with.
struct Assembled {
  std::optional<Node> document;
  Findings findings;
  int status = done;
};

/// `path` may be empty: then --with and --set are all. `texts` collects the bytes that the digest
/// identifies.
Assembled assemble(const std::string& path, const RecipeArguments& arguments, std::string& texts);

}  // namespace capsigh::cli
