// capsigh readings FILE --for RECIPE
#pragma once

#include <CLI/CLI.hpp>
#include <string>

#include "capsigh/constants/library.hpp"
#include "capsigh/readings/readings.hpp"
#include "command.hpp"

namespace capsigh::cli {

struct ReadingsArguments {
  ReadingsRequest request;
  std::string recipe;
  RecipeArguments around;
  std::string summary;  ///< empty: standard error
  std::string as;       ///< of the summary: text or json; empty: by the ending of its file
};

/// Adds the command to the program; what it is called with ends in `arguments`.
CLI::App* add_readings(CLI::App& app, ReadingsArguments& arguments);

int run_readings(const ReadingsArguments& arguments, const Library& library);

}  // namespace capsigh::cli
