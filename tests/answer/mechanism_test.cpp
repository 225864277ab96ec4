// The mechanism of doubt and trace: nothing that is used may be forgotten.
#include <catch2/catch.hpp>

#include <set>

#include "capsigh/answer/solve.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

const std::string kWhole =
    "[gas]\nCO2 = \"60 % ± 0.5 %\"\nair = \"rest\"\n"
    "[contact]\ntemperature = \"31 degC ± 0.3 K\"\npressure = \"1.62 bar gauge ± 0.05 bar\"\n"
    "altitude = \"350 m ± 5 m\"\n[target]\nCO2 = \"1.5 vol\"\n"
    "[container]\nbrimful = \"345 mL ± 1 mL\"\nfill = \"330 mL ± 2 mL\"\n"
    "closed_at = { air = \"30 % ± 5 %\" }\n[opening]\ntemperature = \"50 degC ± 1 K\"\n";

// Opening in time, conditioning and supply.
const std::string kOpened =
    "[liquid]\nlike = \"beer\"\n"
    "[contact]\ntemperature = \"4 degC ± 0.3 K\"\npressure = \"1.2 bar gauge ± 0.05 bar\"\n"
    "[container]\nbrimful = \"345 mL\"\nfill = \"330 mL\"\nclosed_at = { air = \"5 %\" }\n"
    "[opening]\ntemperature = \"8 degC\"\nescape_half_life = \"40 min ± 5 min\"\n"
    "after = [\"5 min ± 1 min\", \"1 h\"]\nreclose_after = \"10 min ± 2 min\"\n"
    "[supply]\nliquid = \"120 hL/h ± 2 hL/h\"\nincoming = { CO2 = \"0.3 g/L ± 0.1 g/L\" }\n"
    "purge = \"150 % ± 20 %\"\n";
const std::string kPoured =
    "[contact]\ntemperature = \"4 degC\"\ndissolved = { CO2 = \"3 vol\" }\n[opening]\n"
    "surface = \"20 cm2 ± 2 cm2\"\nstillness = \"poured\"\nafter = \"5 min\"\n[supply]\n"
    "amount = \"400 hL ± 2 hL\"\n";
const std::string kConditioned =
    "[liquid]\nlike = \"perry\"\n[contact]\ntemperature = \"20 degC ± 1 K\"\n"
    "[container]\nbrimful = \"775 mL\"\nfill = \"750 mL\"\nclosed_at = { air = \"100 %\" }\n"
    "[conditioning]\nsugar = \"glucose monohydrate\"\ndose = \"9 g/L ± 0.1 g/L\"\n"
    "residual = \"16 degC ± 1 K\"\n";
const std::string kDoseFound =
    "[contact]\ntemperature = \"20 degC\"\n[target]\nCO2 = \"2.8 vol\"\n[conditioning]\n"
    "dose = \"find\"\nresidual = { CO2 = \"1.6 g/L ± 0.1 g/L\" }\nyield = \"95 % ± 2 %\"\n";

const std::vector<std::string> kForms = {
    kWhole,
    kOpened,
    kPoured,
    kConditioned,
    kDoseFound,
    "[contact]\ntemperature = \"4 degC ± 0.3 K\"\ndissolved = { CO2 = \"3.7 vol ± 0.1 vol\" }\n",
    "[contact]\npressure = \"2 bar gauge ± 0.1 bar\"\ndissolved = { CO2 = \"6 g/L\" }\n",
    "[gas]\nN2 = \"100 %\"\n[contact]\ntemperature = \"4 degC\"\npressure = \"2 bar abs\"\n"
    "[opening]\n",
    "[contact]\ntemperature = \"4 degC ± 0.3 K\"\npressure = \"1.6 bar gauge ± 0.05 bar\"\n"
    "[container]\nkind = \"PET bottle\"\nbrimful = \"525 mL\"\nfill = \"500 mL ± 2 mL\"\n"
    "rated = \"6 bar gauge\"\nclosed_at = { air = \"30 % ± 5 %\" }\n"
    "storage = [\"4 degC ± 1 K\", \"25 degC ± 2 K\"]\nminimum_ullage = \"3 %\"\n"
    "limit = { CO2 = \"3 vol\", O2 = \"8 mg/L\" }\n",
    "[contact]\ntemperature = \"4 degC\"\npressure = \"1.6 bar gauge\"\n"
    "[container]\nstretch = \"0.4 %/bar ± 0.1 %/bar\"\nbrimful = \"345 mL\"\nfill = \"330 mL\"\n"
    "storage = \"25 degC\"\nwall = { CO2 = \"3 mL/d ± 0.5 mL/d\", O2 = \"0.04 mL/d ± 0.01 mL/d\" "
    "}\n"
    "limit = { CO2 = \"3 vol\" }\n",
};

std::vector<double> figures(const Case& c) {
  const auto result = solve(c);
  REQUIRE(std::holds_alternative<Answer>(result));
  std::vector<double> values;
  each_figure(std::get<Answer>(result), [&](const FigurePath&, const auto& f, const JsonUnit&) {
    values.push_back(si_value(f.value));
  });
  return values;
}

}  // namespace

TEST_CASE("every record in a trace is in doubt, and its z moves a figure") {
  for (const auto& text : kForms) {
    auto c = binding(text).problem;
    Trace trace;
    REQUIRE(std::holds_alternative<Answer>(solve(c, &trace)));
    std::set<std::string> in_trace;
    for (const auto& chain : trace.chains) {
      for (const auto& step : chain.steps) {
        if (step.record != nullptr) in_trace.emplace(step.record->key);
      }
    }
    CHECK(in_trace.size() >= 5);
    const auto at_best = figures(c);
    std::set<std::string> moved;
    for (const auto& doubt : each_doubt(c)) {
      *doubt.z = 1;
      if (figures(c) != at_best) moved.insert(doubt.name);
      *doubt.z = 0;
    }
    for (const auto& key : in_trace) {
      INFO(key);
      CHECK(moved.count(key) == 1);
    }
    CHECK(figures(c) == at_best);
  }
}

TEST_CASE("every input with ± is in doubt and moves a figure") {
  auto c = binding(kWhole).problem;
  const auto at_best = figures(c);
  std::set<std::string> moved;
  for (const auto& doubt : each_doubt(c)) {
    if (doubt.is_record) continue;
    *doubt.z = 1;
    if (figures(c) != at_best) moved.insert(doubt.name);
    *doubt.z = 0;
  }
  CHECK(moved == std::set<std::string>{"contact.temperature", "contact.pressure",
                                       "contact.altitude", "gas.CO2", "container.brimful",
                                       "container.fill", "container.closed_at.air",
                                       "opening.temperature"});
}

TEST_CASE("every input of opening, conditioning and supply moves a figure") {
  std::set<std::string> moved;
  for (const auto& text : {kOpened, kPoured, kConditioned, kDoseFound}) {
    auto c = binding(text).problem;
    const auto at_best = figures(c);
    for (const auto& doubt : each_doubt(c)) {
      if (doubt.is_record) continue;
      *doubt.z = 1;
      if (figures(c) != at_best) moved.insert(doubt.name);
      *doubt.z = 0;
    }
  }
  CHECK(moved == std::set<std::string>{
                     "contact.temperature", "contact.pressure", "opening.escape_half_life",
                     "opening.surface", "opening.after", "opening.reclose_after", "supply.liquid",
                     "supply.amount", "supply.incoming.CO2", "supply.purge", "conditioning.dose",
                     "conditioning.residual", "conditioning.residual.CO2", "conditioning.yield"});
}

TEST_CASE("the last step of a trace is the figure") {
  for (const auto& text : kForms) {
    const auto c = binding(text).problem;
    Trace trace;
    const auto answer = std::get<Answer>(solve(c, &trace));
    std::map<std::string, double> by_path;
    each_figure(answer, [&](const FigurePath& path, const auto& f, const JsonUnit&) {
      if (f.asked) by_path[path.text()] = si_value(f.value);
    });
    REQUIRE(!trace.chains.empty());
    for (const auto& chain : trace.chains) {
      INFO(chain.figure);
      REQUIRE(by_path.count(chain.figure) == 1);
      REQUIRE(!chain.steps.empty());
      const double last = chain.steps.back().result.value;
      // The chain is evaluated once more at the root: rounding only.
      CHECK(std::abs(last - by_path[chain.figure]) <= 1e-12 * std::abs(last) + 1e-18);
    }
  }
}

TEST_CASE("every main figure has its trace") {
  const auto c = binding(kWhole).problem;
  Trace trace;
  REQUIRE(std::holds_alternative<Answer>(solve(c, &trace)));
  std::set<std::string> traced;
  for (const auto& chain : trace.chains) traced.insert(chain.figure);
  for (const std::string figure :
       {"dissolved.CO2.mass_concentration", "dissolved.CO2.volumes",
        "saturation.CO2.pressure_gauge", "container.at.0.pressure_gauge", "opening.headspace_loss",
        "opening.fizz_loss", "opening.flat_loss", "dissolved.O2.mass_concentration",
        "opening.N2.flat_loss"}) {
    INFO(figure);
    CHECK(traced.count(figure) == 1);
  }
}

TEST_CASE("every main figure of opening, conditioning and supply has its trace") {
  std::set<std::string> traced;
  for (const auto& text : {kOpened, kPoured, kConditioned, kDoseFound}) {
    const auto c = binding(text).problem;
    Trace trace;
    REQUIRE(std::holds_alternative<Answer>(solve(c, &trace)));
    for (const auto& chain : trace.chains) traced.insert(chain.figure);
  }
  for (const std::string figure :
       {"opening.cold_gas", "opening.supersaturation", "opening.nucleus_radius",
        "opening.escape_half_life", "opening.fizz_until", "opening.course.0.lost",
        "opening.course.1.dissolved.CO2.mass_concentration", "opening.reclosed.pressure_gauge",
        "conditioning.dose", "conditioning.residual", "conditioning.produced",
        "conditioning.ethanol_added", "conditioning.pressure_gauge", "supply.per_hectolitre",
        "supply.warming"}) {
    INFO(figure);
    CHECK(traced.count(figure) == 1);
  }
}

TEST_CASE("a traced solution is the untraced one, bit by bit") {
  for (const auto& text : kForms) {
    const auto c = binding(text).problem;
    Trace trace;
    const auto traced = std::get<Answer>(solve(c, &trace));
    std::vector<double> values;
    each_figure(traced, [&](const FigurePath&, const auto& f, const JsonUnit&) {
      values.push_back(si_value(f.value));
    });
    CHECK(values == figures(c));
  }
}
