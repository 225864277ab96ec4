// Prints the comparison with every published set, as a table for people.
#define CATCH_CONFIG_RUNNER
#include <fmt/format.h>

#include <catch2/catch.hpp>

#include "published/evaluation.hpp"

TEST_CASE("evaluation") {
  fmt::print("{:<64} {:>6} {:>9} {:>9}  {:>6} {:>6}\n", "set (deviation: published over ours)",
             "points", "mean", "worst", "in u", "in 2u");
  for (const auto& set : capsigh::test::all_sets()) {
    fmt::print("{:<64} {:>6} {:>+9.3g} {:>+9.3g}  {:>5.0f}% {:>5.0f}%  [{}]\n", set.name,
               set.points.size(), set.mean(), set.worst(), 100 * set.inside(1), 100 * set.inside(2),
               set.unit);
  }
}

int main(int argc, char** argv) { return Catch::Session().run(argc, argv); }
