// Random packages: what no package may break.
#include <catch2/catch.hpp>

#include <random>

#include "capsigh/balance/opened.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

// The three losses of CO2, and what was inside, kg.
struct Losses {
  double headspace = 0;
  double fizz = 0;
  double flat = 0;
  double inside = 0;
};

Losses losses(const Medium& m, const Opened& o, Pressure ambient, const Shares& air) {
  const double all = (o.contents[m.co2] * o.liquid + o.in_headspace[m.co2]).value() *
                     m.gases[m.co2].molar_mass.at(nullptr).value();
  return {headspace_loss(nullptr, m, o, m.co2).value(),
          fizz_loss(nullptr, m, o, ambient, m.co2).value(),
          flat_loss(nullptr, m, o, ambient, air, m.co2, true).value(), all};
}

}  // namespace

TEST_CASE("10,000 random packages: losses on opening are increments of what is inside") {
  std::mt19937_64 random(20210607);
  const auto between = [&](double low, double high) {
    return std::uniform_real_distribution<double>(low, high)(random);
  };
  const std::string recipe =
      "[contact]\ntemperature = \"4 degC\"\ndissolved = { CO2 = \"2.6 vol\" }\n"
      "[container]\nbrimful = \"345 mL\"\nfill = \"330 mL\"\nclosed_at = { air = \"20 %\" }\n"
      "[opening]\n";
  // Water by composition, beer and wine by their trade's relation.
  std::vector<Case> cases;
  for (const std::string like : {"water", "soft drink", "beer", "sparkling wine"}) {
    cases.push_back(binding("[liquid]\nlike = \"" + like + "\"\n" + recipe).problem);
  }
  int opened_packages = 0;
  int negative = 0;
  int more_than_inside = 0;
  int no_number = 0;
  int unclosed = 0;
  constexpr int packages = 10000;
  for (int n = 0; n < packages; ++n) {
    const Case& c = cases[static_cast<std::size_t>(n) % cases.size()];
    const Medium& m = c.medium;
    const auto liquid = liquid_of(m);
    const auto ambient = bar(between(0.7, 1.05));
    const double air = between(0, 1);
    Closing closing;
    closing.temperature = celsius(between(1, 25));
    closing.pressure = ambient;
    // From rigid to soft: up to 2 % a bar.
    closing.shell = {from_si<Volume>(between(0.2e-3, 20e-3)),
                     from_si<Compliance>(between(0, 0.02) * 1e-5), ambient};
    closing.fill = closing.shell.brimful * between(0.5, 0.97);
    closing.contents.resize(m.size());
    closing.contents[m.co2] = from_si<Molality>(between(0, 0.25));  // up to 11 g/L
    closing.headspace.resize(m.size(), Fraction(0.0));
    for (std::size_t i = 0; i < m.size(); ++i) closing.headspace[i] = c.air[i] * air;
    closing.headspace[m.co2] += Fraction(1.0 - air);
    const auto filling = close(m, liquid, closing);
    const auto found = equilibrium(m, liquid, filling, celsius(between(1, 40)));
    if (refused(found) != nullptr) continue;  // beyond the gas law, or full of liquid
    ++opened_packages;
    const auto& state = std::get<ClosedState>(found);
    const auto o = open_package(m, filling, state, ambient, c.air);
    const auto l = losses(m, o, ambient, c.air);
    if (l.headspace < 0 || l.fizz < 0 || l.flat < 0) ++negative;
    // Rounding of a sum.
    if (l.headspace + l.fizz + l.flat > l.inside * (1 + 1e-12)) ++more_than_inside;
    if (!std::isfinite(l.headspace + l.fizz + l.flat + l.inside)) ++no_number;
    // Closed again after any while: nothing below zero, and not above what it was.
    const Fraction left(between(0, 1));
    const auto flat = flat_contents(m, o, ambient, c.air);
    const auto again =
        closed_again(m, filling, state, o, contents_in_time(o, flat, left), left, ambient, c.air);
    const auto settled = equilibrium(m, liquid, again, state.at.t);
    const bool sound = refused(settled) == nullptr &&
                       std::isfinite(std::get<ClosedState>(settled).pressure.value()) &&
                       std::all_of(again.amounts.begin(), again.amounts.end(),
                                   [](Amount a) { return a.value() >= 0; });
    if (!sound) ++unclosed;
  }
  CHECK(opened_packages > packages * 8 / 10);
  CHECK(negative == 0);
  CHECK(more_than_inside == 0);
  CHECK(no_number == 0);
  CHECK(unclosed == 0);
}
