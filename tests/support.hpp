// What the tests share: recipes answered in memory, comparison with stated tolerances, and the
// published tables of tests/published/.
#pragma once

#include <fmt/format.h>
#include <catch2/catch.hpp>

#include <cmath>
#include <fstream>
#include <map>
#include <sstream>
#include <string>
#include <vector>

#include "capsigh/answer/bind.hpp"
#include "capsigh/answer/report.hpp"
#include "capsigh/answer/solve.hpp"
#include "capsigh/constants/library.hpp"
#include "capsigh/document/document.hpp"

namespace capsigh::test {

/// |a − b| ≤ tolerance·|b|.
inline bool within_relative(double a, double b, double tolerance) {
  return std::abs(a - b) <= tolerance * std::abs(b);
}

inline Recipe recipe(const std::string& text) {
  auto document = parse_document(text, "test.toml");
  REQUIRE(document);
  auto read = read_recipe(*document, "test.toml");
  REQUIRE(read);
  REQUIRE(read.findings.empty());
  return *read;
}

inline Binding binding(const std::string& text) {
  auto bound = bind(recipe(text), built_in_library());
  REQUIRE(bound);
  return *bound;
}

inline Report answered(const std::string& text) {
  auto document = parse_document(text, "test.toml");
  REQUIRE(document);
  auto result = report(read_recipe(*document, "test.toml"), text, built_in_library());
  for (const auto& f : result.findings) UNSCOPED_INFO(f.message);
  REQUIRE(result);
  return *result;
}

/// Code of every finding of a recipe that has no answer.
inline std::vector<std::string> refusals(const std::string& text) {
  auto document = parse_document(text, "test.toml");
  std::vector<std::string> codes;
  if (!document) {
    for (const auto& f : document.findings) codes.push_back(f.code);
    return codes;
  }
  auto result = report(read_recipe(*document, "test.toml"), text, built_in_library());
  for (const auto& f : result.findings) codes.push_back(f.code);
  return codes;
}

using Row = std::map<std::string, std::string>;

/// A table of tests/published: comma-separated, no quotes, # starts a comment line.
inline std::vector<Row> table(const std::string& name) {
  std::ifstream in(std::string(CAPSIGH_SOURCE) + "/tests/published/" + name);
  REQUIRE(in);
  std::vector<Row> rows;
  std::vector<std::string> header;
  std::string line;
  while (std::getline(in, line)) {
    if (line.empty() || line.front() == '#') continue;
    std::vector<std::string> cells;
    std::stringstream cut(line);
    for (std::string cell; std::getline(cut, cell, ',');) cells.push_back(cell);
    if (header.empty()) {
      header = cells;
      continue;
    }
    Row row;
    for (std::size_t i = 0; i < header.size() && i < cells.size(); ++i) row[header[i]] = cells[i];
    rows.push_back(row);
  }
  REQUIRE(!rows.empty());
  return rows;
}

inline double number(const Row& row, const std::string& column) {
  return std::stod(row.at(column));
}

/// The medium of water with these gases.
inline Medium medium(const std::string& gas_lines) {
  return binding("[gas]\n" + gas_lines +
                 "\n[contact]\ntemperature = \"10 degC\"\npressure = \"2 bar abs\"\n")
      .problem.medium;
}

/// The liquid of a medium, resolved.
inline Liquid liquid_of(const Medium& m) { return compose(m.liquid, m.content_temperature); }

inline Temperature celsius(double t) { return from_si<Temperature>(t + 273.15); }
inline Pressure bar(double p) { return from_si<Pressure>(p * 1e5); }

}  // namespace capsigh::test
