// Prints the unit table for the comparison with GNU units.
#include <fmt/format.h>

#include "capsigh/quantity/grammar.hpp"

int main() {
  for (const auto& unit : capsigh::unit_table()) {
    fmt::print("{}\t{}\t{:.17g}\t{:.17g}\n", unit.text, capsigh::dimension_name(unit.dimension),
               unit.factor, unit.offset);
  }
}
