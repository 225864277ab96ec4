#include "capsigh/quantity/finding.hpp"

#include <algorithm>
#include <cctype>
#include <numeric>

namespace capsigh {
namespace {

char lowered(char c) { return static_cast<char>(std::tolower(static_cast<unsigned char>(c))); }

// Edit distance with transpositions (optimal string alignment), letters compared without case.
std::size_t edit_distance(const std::string& a, const std::string& b) {
  std::vector<std::size_t> before(b.size() + 1);
  std::vector<std::size_t> last(b.size() + 1);
  std::vector<std::size_t> row(b.size() + 1);
  std::iota(last.begin(), last.end(), std::size_t{0});
  for (std::size_t i = 1; i <= a.size(); ++i) {
    row[0] = i;
    for (std::size_t j = 1; j <= b.size(); ++j) {
      const std::size_t change = lowered(a[i - 1]) == lowered(b[j - 1]) ? 0 : 1;
      row[j] = std::min({last[j] + 1, row[j - 1] + 1, last[j - 1] + change});
      const bool swapped = i > 1 && j > 1 && lowered(a[i - 1]) == lowered(b[j - 2]) &&
                           lowered(a[i - 2]) == lowered(b[j - 1]);
      if (swapped) row[j] = std::min(row[j], before[j - 2] + 1);
    }
    before = last;
    last = row;
  }
  return last[b.size()];
}

}  // namespace

std::optional<std::string> nearest_name(const std::string& name,
                                        const std::vector<std::string>& known) {
  constexpr std::size_t longest_considered = 64;
  if (name.size() > longest_considered) return std::nullopt;
  std::optional<std::string> best;
  std::size_t best_distance = name.size() / 3 + 2;  // a third of the letters, and one, may be wrong
  for (const auto& candidate : known) {
    const std::size_t distance = edit_distance(name, candidate);
    if (distance < best_distance) {
      best = candidate;
      best_distance = distance;
    }
  }
  return best;
}

}  // namespace capsigh
