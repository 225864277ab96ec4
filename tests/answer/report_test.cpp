#include <catch2/catch.hpp>

#include "capsigh/render/render.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

// Part of a figure's standard uncertainty that inputs or records bring.
double share_of(const Report& r, const std::string& figure, bool records) {
  double variance = 0;
  for (const auto& line : r.budget) {
    if (line.of == figure && line.is_record == records) {
      variance += line.contribution * line.contribution;
    }
  }
  return std::sqrt(variance);
}

}  // namespace

TEST_CASE("instruments of 0.3 K and 0.05 bar at 3.70 vol, 4 degC, 350 m: u 0.047 vol") {
  // An independent calculation, first order.
  const auto r = answered(
      "[contact]\ntemperature = \"4 degC ± 0.3 K\"\npressure = \"1.623 bar gauge ± 0.05 bar\"\n"
      "altitude = \"350 m\"\n");
  CHECK(std::abs(si_value(r.answer.gases[0].volumes.value) - 3.70) < 0.005);
  CHECK(std::abs(share_of(r, "dissolved.CO2.volumes", false) - 0.047) <= 0.0005);
  // With the records: 0.7 % of 3.7 vol for Henry's constant is the largest, 0.026 vol.
  const double u = si_value(r.answer.gases[0].volumes.u);
  CHECK(within_relative(u * u,
                        std::pow(share_of(r, "dissolved.CO2.volumes", false), 2) +
                            std::pow(share_of(r, "dissolved.CO2.volumes", true), 2),
                        1e-5));
  CHECK(std::abs(u - std::hypot(0.047, 0.0262)) < 0.001);
}

TEST_CASE("a limit of error is rectangular") {
  const auto r =
      answered("[contact]\ntemperature = \"4 degC ± 0.3 K\"\npressure = \"1 bar gauge\"\n");
  CHECK(within_relative(si_value(r.answer.temperature.u), 0.3 / std::sqrt(3.0), 1e-12));
}

TEST_CASE("shares of a budget add up to one") {
  const auto r = answered(
      "[contact]\ntemperature = \"4 degC ± 0.3 K\"\npressure = \"1 bar gauge ± 0.1 bar\"\n");
  double sum = 0;
  for (const auto& line : r.budget) {
    if (line.of == "dissolved.CO2.volumes") sum += line.share;
  }
  CHECK(std::abs(sum - 1) < 1e-4);  // shares below 1e-6 are left out
}

TEST_CASE("what is given exactly has no u of its own") {
  const auto r =
      answered("[contact]\ntemperature = \"4 degC\"\ndissolved = { CO2 = \"3.7 vol\" }\n");
  CHECK(si_value(r.answer.gases[0].volumes.u) == 0);
  CHECK(si_value(r.answer.pressure_gauge.u) > 0);
  CHECK(json_reports({r}, false).find("\"u\": 0.0\n") == std::string::npos);
}

TEST_CASE("assumptions and unstated doubts are listed") {
  const auto r = answered("[contact]\ntemperature = \"4 degC\"\npressure = \"1 bar gauge\"\n");
  std::vector<std::string> codes;
  for (const auto& a : r.assumptions) codes.push_back(a.code);
  CHECK(codes == std::vector<std::string>{"liquid-assumed", "gas-assumed", "ambient-assumed"});
  CHECK(r.doubt_not_stated ==
        std::vector<std::string>{"contact.ambient", "contact.temperature", "contact.pressure"});
}

TEST_CASE("a target never over-determines") {
  const auto r = answered(
      "[contact]\ntemperature = \"4 degC\"\npressure = \"1 bar gauge\"\n[target]\n"
      "CO2 = \"3.7 vol\"\n");
  // Contact by its own pressure, the saturation by the target.
  CHECK(std::abs(si_value(r.answer.pressure_gauge.value) - 1e5) < 1e-6);
  CHECK(within_relative(si_value(r.answer.saturation[0].pressure_gauge.value), 1.579e5, 0.003));
}

TEST_CASE("sources cover every record of the trace") {
  const auto r = answered("[contact]\ntemperature = \"4 degC\"\npressure = \"1 bar gauge\"\n");
  for (const auto& chain : r.trace.chains) {
    for (const auto& step : chain.steps) {
      if (step.record == nullptr) continue;
      const bool cited = std::any_of(r.sources.begin(), r.sources.end(),
                                     [&](const auto& s) { return s.key == step.record->source; });
      CHECK(cited);
    }
  }
}
