#include "salts.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cctype>
#include <cmath>
#include <numeric>
#include <optional>

namespace capsigh::answer_detail {
namespace {

constexpr std::string_view kIonPrefix = "ion.";
constexpr int kMostOfOne = 4;  // ions of one kind in a formula unit

struct Ion {
  const Record* record = nullptr;
  std::string formula;  // without the charge
  int charge = 0;
};

// "ion.Ca2+" is Ca with charge 2: the sign ends the key, a magnitude above one stands before it.
Ion read_ion(const Record& record) {
  Ion ion{&record, std::string(record.key.substr(kIonPrefix.size())),
          static_cast<int>(std::lround(record.values[1].value))};
  ion.formula.pop_back();
  if (std::abs(ion.charge) > 1) ion.formula.pop_back();
  return ion;
}

std::vector<Ion> all_ions(const Library& library) {
  std::vector<Ion> ions;
  for (const auto& record : library.records()) {
    if (record.key.starts_with(kIonPrefix)) ions.push_back(read_ion(record));
  }
  return ions;
}

bool polyatomic(const std::string& formula) {
  return std::count_if(formula.begin(), formula.end(),
                       [](char c) { return std::isupper(static_cast<unsigned char>(c)) != 0; }) > 1;
}

std::string several(const std::string& formula, int count) {
  if (count == 1) return formula;
  return polyatomic(formula) ? fmt::format("({}){}", formula, count)
                             : fmt::format("{}{}", formula, count);
}

std::string written(const Ion& cation, int n, const Ion& anion, int m) {
  return several(cation.formula, n) + several(anion.formula, m);
}

// Reads a formula's element counts: letters, numbers, round or square brackets.
class FormulaReader {
 public:
  FormulaReader(const Library& library, const std::string& formula)
      : library_(library), text_(formula) {}

  // Molar mass in kg/mol; nullopt for what is no formula of known elements.
  std::optional<double> mass() {
    const double sum = group();
    return bad_ || at_ != text_.size() ? std::nullopt : std::optional(sum);
  }

 private:
  double group() {
    double sum = 0;
    while (!bad_ && at_ < text_.size() && text_[at_] != ')' && text_[at_] != ']') {
      double part = 0;
      if (text_[at_] == '(' || text_[at_] == '[') {
        ++at_;
        part = group();
        if (at_ >= text_.size()) bad_ = true;
        ++at_;
      } else {
        part = element();
      }
      sum += part * count();
    }
    return sum;
  }

  double element() {
    std::string symbol(1, text_[at_++]);
    while (at_ < text_.size() && std::islower(static_cast<unsigned char>(text_[at_])) != 0) {
      symbol += text_[at_++];
    }
    const Record* weight = library_.find("atomic_weight." + symbol);
    if (weight == nullptr) {
      bad_ = true;
      return 0;
    }
    return weight->values[0].value * weight->factor;
  }

  double count() {
    int n = 0;
    constexpr int most = 1000;
    while (at_ < text_.size() && std::isdigit(static_cast<unsigned char>(text_[at_])) != 0) {
      n = std::min(n * 10 + (text_[at_++] - '0'), most);
    }
    return n == 0 ? 1 : n;
  }

  const Library& library_;
  const std::string& text_;
  std::size_t at_ = 0;
  bool bad_ = false;
};

}  // namespace

Salt read_salt(const Library& library, const std::string& formula) {
  Salt salt;
  const auto ions = all_ions(library);
  for (const auto& cation : ions) {
    if (cation.charge <= 0 || formula.find(cation.formula) == std::string::npos) continue;
    for (const auto& anion : ions) {
      if (anion.charge >= 0 || formula.find(anion.formula) == std::string::npos) continue;
      for (int n = 1; n <= kMostOfOne; ++n) {
        for (int m = 1; m <= kMostOfOne; ++m) {
          if (written(cation, n, anion, m) != formula) continue;
          if (n * cation.charge + m * anion.charge == 0) {
            salt.ions = {{cation.record, static_cast<double>(n)},
                         {anion.record, static_cast<double>(m)}};
            salt.molar_mass = FormulaReader(library, formula).mass().value_or(0);
            if (!(salt.molar_mass > 0)) salt.ions.clear();
            return salt;
          }
          const int both = std::lcm(cation.charge, -anion.charge);
          salt.neutral = written(cation, both / cation.charge, anion, both / -anion.charge);
        }
      }
    }
  }
  return salt;
}

}  // namespace capsigh::answer_detail
