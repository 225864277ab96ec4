#include "capsigh/answer/figures.hpp"

namespace capsigh {

std::string FigurePath::text() const {
  std::string joined;
  for (const auto part : *this) {
    if (!joined.empty()) joined += '.';
    joined += part;
  }
  return joined;
}

}  // namespace capsigh
