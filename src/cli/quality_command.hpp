// The commands card and merge.
#pragma once

#include <CLI/CLI.hpp>
#include <string>
#include <vector>

#include "capsigh/constants/library.hpp"
#include "command.hpp"

namespace capsigh::cli {

struct CardArguments {
  std::string recipe;
  RecipeArguments around;
  std::vector<std::string> units;
  std::string as = "text";
  std::string out;
  bool strict = false;
};

CLI::App* add_card(CLI::App& app, CardArguments& arguments);
int run_card(const CardArguments& arguments, const Library& library);

struct MergeArguments {
  std::vector<std::string> summaries;
  std::string as;
  std::string out;
};

CLI::App* add_merge(CLI::App& app, MergeArguments& arguments);
int run_merge(const MergeArguments& arguments, const Library& library);

}  // namespace capsigh::cli
