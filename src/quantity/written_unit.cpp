#include <cctype>
#include <charconv>

#include "capsigh/quantity/grammar.hpp"

namespace capsigh {
namespace {

void skip_spaces(std::string_view& text) {
  while (!text.empty() && std::isspace(static_cast<unsigned char>(text.front())) != 0) {
    text.remove_prefix(1);
  }
}

}  // namespace

const Unit* written_unit(std::string_view quantity, Dimension dimension) {
  skip_spaces(quantity);
  if (quantity.starts_with('+')) quantity.remove_prefix(1);
  double number = 0;
  const auto read = std::from_chars(quantity.data(), quantity.data() + quantity.size(), number);
  quantity.remove_prefix(static_cast<std::size_t>(read.ptr - quantity.data()));
  skip_spaces(quantity);
  for (const std::string_view sign : {"±", "+/-", "+-"}) {
    quantity = quantity.substr(0, quantity.find(sign));
  }
  while (!quantity.empty() && quantity.back() == ' ') quantity.remove_suffix(1);
  return find_unit(quantity, dimension);
}

}  // namespace capsigh
