#include <catch2/catch.hpp>

#include "capsigh/quantity/grammar.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

constexpr std::array kPressure{Dimension::pressure};
constexpr std::array kTemperature{Dimension::temperature};
constexpr std::array kContent{Dimension::gas_volumes, Dimension::mass_concentration,
                              Dimension::mass_fraction};

ParsedQuantity parsed(std::string_view text, std::span<const Dimension> dimensions) {
  const auto result = parse_quantity(text, {.dimensions = dimensions, .example = ""});
  INFO(text);
  REQUIRE(std::holds_alternative<ParsedQuantity>(result));
  return std::get<ParsedQuantity>(result);
}

std::string fault(std::string_view text, std::span<const Dimension> dimensions) {
  const auto result = parse_quantity(text, {.dimensions = dimensions, .example = ""});
  INFO(text);
  REQUIRE(std::holds_alternative<GrammarFault>(result));
  return std::get<GrammarFault>(result).code;
}

}  // namespace

TEST_CASE("grammar reads a pressure with reference and limit of error") {
  const auto q = parsed("2.3 bar gauge ± 0.05 bar", kPressure);
  CHECK(within_relative(q.value, 2.3e5, 1e-15));  // one multiplication
  CHECK(q.reference == Reference::gauge);
  REQUIRE(q.plus_minus);
  CHECK(within_relative(*q.plus_minus, 5e3, 1e-15));  // one multiplication
  CHECK(parsed("2.3 barg", kPressure).reference == Reference::gauge);
  CHECK(parsed("38 psia", kPressure).reference == Reference::absolute);
  CHECK(parsed("  2.0   bar   abs  ", kPressure).value == 2e5);
  CHECK(parsed("-0.2 bar gauge", kPressure).value == -2e4);
}

TEST_CASE("grammar keeps temperature points and differences apart") {
  CHECK(parsed("4 degC ± 0.3 K", kTemperature).value == 277.15);
  CHECK(parsed("4 °C ± 0.3 °C", kTemperature).plus_minus == 0.3);
  // 39.2 °F is 4 °C; a difference of 1.8 °F is 1 K. The tolerance is rounding only.
  CHECK(within_relative(parsed("39.2 degF", kTemperature).value, 277.15, 1e-14));
  CHECK(within_relative(*parsed("39.2 degF +/- 1.8 degF", kTemperature).plus_minus, 1.0, 1e-14));
}

TEST_CASE("grammar reads contents in every measure") {
  CHECK(parsed("3.70 vol ± 0.10 vol", kContent).dimension == Dimension::gas_volumes);
  CHECK(within_relative(parsed("7.3 g/L", kContent).value, 7.3, 1e-15));
  CHECK(within_relative(parsed("0.5 % w/w", kContent).value, 5e-3, 1e-15));
  CHECK(within_relative(parsed("0.6 g/100 mL", kContent).value, 6.0, 1e-15));
}

TEST_CASE("grammar names what is wrong") {
  CHECK(fault("2.3 bar", kPressure) == "pressure-reference-missing");
  CHECK(fault("2,3 bar gauge", kPressure) == "decimal-comma");
  CHECK(fault("bar gauge", kPressure) == "number-missing");
  CHECK(fault("", kPressure) == "number-missing");
  CHECK(fault("nan bar gauge", kPressure) == "number-missing");
  CHECK(fault("inf bar gauge", kPressure) == "number-missing");
  CHECK(fault("1e999 bar gauge", kPressure) == "number-out-of-range");
  CHECK(fault("1e308 bar gauge", kPressure) == "number-out-of-range");
  CHECK(fault("2.3", kPressure) == "unit-missing");
  CHECK(fault("2.3 barg abs", kPressure) == "reference-contradicts");
  CHECK(fault("30 psia gauge", kPressure) == "reference-contradicts");
  CHECK(fault("4 °", kTemperature) == "degree-of-what");
  CHECK(fault("4 degC Â± 0.3 K", kTemperature) == "plus-minus-broken");
  CHECK(fault("4 degC +- 0.3 K", kTemperature) == "plus-minus-broken");
  CHECK(fault("4 degC ? 0.3 K", kTemperature) == "plus-minus-broken");
  CHECK(fault("2.3 baar gauge", kPressure) == "unit-unknown");
  CHECK(fault("2.3 degC", kPressure) == "unit-wrong-kind");
  CHECK(fault("4 degC gauge", kTemperature) == "reference-misplaced");
  CHECK(fault("4 degC ± 0 K", kTemperature) == "plus-minus-not-positive");
  CHECK(fault("4 degC ± 0.3", kTemperature) == "unit-missing");
  CHECK(fault("4 degC ± 0.3 bar", kTemperature) == "unit-wrong-kind");
  CHECK(fault("4 degC ± 0.3 K ± 1 K", kTemperature) == "text-left-over");
}

TEST_CASE("grammar reads pipe sizes") {
  constexpr std::array length{Dimension::length};
  CHECK(within_relative(parsed("3/4 in", length).value, 0.01905, 1e-15));
  CHECK(fault("3/0 in", length) == "unit-unknown");
}

TEST_CASE("every unit round trips") {
  for (const auto& unit : unit_table()) {
    for (const double number : {-40.0, 0.0, 0.37, 12.5, 1013.25}) {
      const double si = number * unit.factor + unit.offset;
      // Rounding of the offset's size only.
      CHECK(std::abs(in_unit(si, unit) - number) <= 1e-12 * (std::abs(number) + 1000));
    }
  }
}

TEST_CASE("value and uncertainty are rounded together (JCGM 100, 7.2.6)") {
  const auto check = [](double value, double u, std::string_view v, std::string_view pm) {
    const auto r = rounded(value, u);
    CHECK(r.value == v);
    CHECK(r.plus_minus == pm);
  };
  check(3.70123, 0.10512, "3.70", "0.11");
  check(10.05762, 0.027, "10.058", "0.027");  // the guide's own numbers: 10,057 62 Ω, 27 mΩ
  check(3.70123, 0.0996, "3.70", "0.10");
  check(1234.5, 132, "1230", "130");
  check(-0.0001, 0.02, "0.000", "0.020");
  check(2.0, 0, "2.000", "");
}

TEST_CASE("numbers are printed without surprises") {
  CHECK(significant(-0.00004, 3) == "-4.00e-05");
  CHECK(significant(0.0, 4) == "0.000");
  CHECK(significant(999.96, 4) == "1000");
  CHECK(for_machines(0.1 + 0.2) == 0.3);
  CHECK(for_machines(-0.0) == 0);
}

TEST_CASE("limits are rounded so that they never widen") {
  CHECK(rounded_up(3.67912, 0.0813) == "3.680");
  CHECK(rounded_down(3.72088, 0.0813) == "3.720");
  CHECK(rounded_up(3.68, 0.081) == "3.680");
  CHECK(rounded_down(3.68, 0.081) == "3.680");
  CHECK(rounded_down(0.1466, 0.1466) == "0.14");
  CHECK(rounded_up(1234.5, 230) == "1240");
  CHECK(rounded_down(-1.2345, 0.11) == "-1.24");
}

TEST_CASE("what people write for times, areas and flows is led to the unit") {
  const auto meant = [](const std::string& text, Dimension d) {
    const std::array only{d};
    const auto parsed = parse_quantity(text, {.dimensions = only, .example = ""});
    const auto* fault = std::get_if<GrammarFault>(&parsed);
    return fault == nullptr ? std::string() : fault->message;
  };
  CHECK(meant("2 hours", Dimension::duration).find("'h'") != std::string::npos);
  CHECK(meant("3 weeks", Dimension::duration).find("'wk'") != std::string::npos);
  CHECK(meant("20 cm²", Dimension::area).find("'cm2'") != std::string::npos);
  CHECK(meant("120 hl/h", Dimension::volume_flow).find("'hL/h'") != std::string::npos);
  CHECK(meant("12 wk", Dimension::duration).empty());
}
