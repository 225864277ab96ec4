// Plans for tests: a recipe as readings are judged by it.
#pragma once

#include <stdexcept>
#include <string>

#include "capsigh/document/document.hpp"
#include "capsigh/readings/readings.hpp"

namespace capsigh::test {

inline const std::string kSparklingWater =
    "[contact]\naltitude = \"350 m\"\n[gauge]\npressure = \"± 0.05 bar\"\ntemperature = \"± 0.3 "
    "K\"\n[target]\nCO2 = \"3.70 vol ± 0.15 vol\"\n";

inline ReadingPlan reading_plan(const std::string& text) {
  const auto document = parse_document(text, "test.toml");
  if (!document) throw std::invalid_argument("no TOML");
  const auto recipe = read_recipe(*document, "test.toml");
  if (!recipe) throw std::invalid_argument("no recipe");
  auto plan = plan_readings(*recipe, text, built_in_library());
  if (!plan) throw std::invalid_argument(plan.findings.front().message);
  return std::move(*plan.value);
}

}  // namespace capsigh::test
