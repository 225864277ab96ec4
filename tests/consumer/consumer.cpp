// A program of someone else's: a recipe in memory, one figure out.
#include <cstdio>

#include "capsigh/answer/report.hpp"

int main() {
  const char* text = "[contact]\ntemperature = \"4 degC\"\ndissolved = { CO2 = \"3.7 vol\" }\n";
  const auto document = capsigh::parse_document(text, "memory");
  if (!document) return 1;
  const auto recipe = capsigh::read_recipe(*document, "memory");
  const auto answered = capsigh::report(recipe, text, capsigh::built_in_library());
  if (!answered) return 1;
  std::printf("%.3f\n", capsigh::si_value(answered->answer.pressure_gauge.value) / 1e5);
  return 0;
}
