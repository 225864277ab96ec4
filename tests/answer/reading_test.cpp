// Readings of packages: gauge, offsets, air, piercer, and the operator's card.
#include <catch2/catch.hpp>

#include "capsigh/answer/card.hpp"
#include "capsigh/answer/reading.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

constexpr double kBar = 1e5;      // Pa
constexpr double kZero = 273.15;  // K

// A package of water, 330 mL in 345 mL, at sea level.
std::string package(const std::string& gauge = "") {
  return "[contact]\nambient = \"1013.25 hPa\"\n[container]\nbrimful = \"345 mL\"\nfill = \"330 "
         "mL\"\n"
         "[target]\nCO2 = \"2.6 vol ± 0.1 vol\"\n" +
         gauge;
}

ReadingBinding bound(const std::string& text, bool with_air = false) {
  auto b = bind_readings(recipe(text), built_in_library(), with_air);
  for (const auto& f : b.findings) UNSCOPED_INFO(f.message);
  REQUIRE(b);
  return *b;
}

GaugeReading reading(double celsius, double bar) {
  return {from_si<Temperature>(kZero + celsius), from_si<GaugePressure>(bar * kBar), {}, {}};
}

double content(const ReadingBinding& b, const GaugeReading& r) {
  const auto found = ReadingModel(b.binding.problem, b.gas, b.measure).content(r);
  REQUIRE(refused(found) == nullptr);
  return std::get<double>(found);
}

Card card_of(const std::string& text) {
  auto document = parse_document(text, "test.toml");
  REQUIRE(document);
  auto made = card(read_recipe(*document, "test.toml"), text, built_in_library());
  for (const auto& f : made.findings) UNSCOPED_INFO(f.message);
  REQUIRE(made);
  return *made;
}

std::vector<std::string> card_refusals(const std::string& text) {
  auto document = parse_document(text, "test.toml");
  REQUIRE(document);
  auto made = card(read_recipe(*document, "test.toml"), text, built_in_library());
  REQUIRE_FALSE(made);
  std::vector<std::string> codes;
  for (const auto& f : made.findings) codes.push_back(f.code);
  return codes;
}

}  // namespace

TEST_CASE("a plain reading is what the report says of that temperature and pressure") {
  for (const std::string liquid : {"water", "soft drink", "beer", "sparkling wine", "seawater"}) {
    for (const double celsius : {1.0, 4.0, 20.0, 35.0}) {
      const std::string head = "[liquid]\nlike = \"" + liquid + "\"\n";
      const auto b =
          bound(head + "[contact]\naltitude = \"350 m\"\n[target]\nCO2 = \"5 g/L ± 1 g/L\"\n");
      const auto r = answered(head +
                              "[contact]\naltitude = \"350 m\"\npressure = \"1.6 bar gauge\"\n"
                              "temperature = \"" +
                              fmt::format("{} degC\"\n", celsius));
      // The same laws: rounding of the last bits.
      CHECK(within_relative(content(b, reading(celsius, 1.6)),
                            r.answer.gases[0].mass_concentration.value.value(), 1e-12));
    }
  }
}

TEST_CASE("offsets are added to what is shown") {
  const auto plain = bound(package());
  const auto offset =
      bound(package("[gauge]\noffset = { pressure = \"-0.02 bar\", temperature = \"0.1 K\" }\n"));
  CHECK(within_relative(content(offset, reading(4.0, 1.02)), content(plain, reading(4.1, 1.0)),
                        1e-12));
}

TEST_CASE("air in a package of 330 mL and 15 mL of headspace") {
  const auto b = bound(package(), true);
  auto with_air = reading(25.0, 2.5);
  with_air.air = from_si<Volume>(1e-6);
  const ReadingModel model(b.binding.problem, b.gas, b.measure);
  const auto corrected = std::get<CorrectedReading>(model.corrected(with_air));
  const double p_air = (2.5 * kBar + 101325 - corrected.pressure.value()) / kBar;
  // 1 mL of air at ambient: 1.01325/(15 + 0.019 × 330) = 0.0477 bar with the Ostwald coefficient
  // 0.019 of air at 25 °C in two digits. Content falls by that share of the pressure of CO2, less
  // 2 % of it that non-ideality takes. Half a unit of the coefficient's last digit is 0.0004 bar, a
  // tenth of a millilitre of headspace 0.0002.
  CHECK(std::abs(p_air - 0.0477) <= 0.0006);
  const double more = content(b, reading(25.0, 2.5)) / content(b, with_air) - 1;
  CHECK(std::abs(more - 0.0477 / (3.513 - 0.0317 - 0.0477)) <= 0.0005);
}

TEST_CASE("a piercer's dead volume, with air and evacuated") {
  // 10 mL at 3 bar in 330 mL of water in 345 mL, 4 °C: reads about 8 % high with air (air alone
  // +7.8 % at 4.0 bar absolute, less what its room takes), 2 % low evacuated.
  const auto plain = bound(package());
  const auto air = bound(package("[gauge]\npiercer_volume = \"10 mL\"\n"));
  const auto empty =
      bound(package("[gauge]\npiercer_volume = \"10 mL\"\npiercer_gas = \"evacuated\"\n"));
  const auto full = bound(package("[gauge]\npiercer_volume = \"10 mL\"\npiercer_gas = \"CO2\"\n"));
  const double shown = content(plain, reading(4, 3));
  const double evacuated = content(empty, reading(4, 3));
  CHECK(std::abs(shown / evacuated - 1 + 0.02) <= 0.003);
  const double with_air = content(air, reading(4, 3));
  // p_air = 1.01325 × 10/(25 + 0.027 × 330) = 0.299 bar of 4.005 bar of CO2: +8.1 % against what is
  // left, and 2.1 % of that went into the dead volume.
  CHECK(std::abs(shown / (with_air * shown / evacuated) - 1 - 0.081) <= 0.004);
  CHECK(content(full, reading(4, 3)) < evacuated);
  CHECK(content(full, reading(4, 3)) > with_air);
}

TEST_CASE("amounts are conserved through piercing, and back") {
  for (const std::string gas : {"air", "evacuated", "CO2", "N2"}) {
    const auto b = bound(package("[gauge]\npiercer_volume = \"10 mL\"\npiercer_gas = \"" + gas +
                                 "\"\noffset = { pressure = \"0.05 bar\" }\n"));
    const ReadingModel model(b.binding.problem, b.gas, b.measure);
    for (const double celsius : {2.0, 20.0, 40.0}) {
      const auto t = from_si<Temperature>(kZero + celsius);
      const auto p = model.pressure(t, 2.6);
      REQUIRE(refused(p) == nullptr);
      const auto back = model.content({t, std::get<GaugePressure>(p), {}, {}});
      REQUIRE(refused(back) == nullptr);
      // Two roots of 1e-15 relative each, over a correction of some per cent.
      CHECK(within_relative(std::get<double>(back), 2.6, 1e-11));
    }
  }
}

TEST_CASE("a package that stretches has more room for air, and comes back through piercing") {
  const std::string soft =
      "[contact]\nambient = \"1013.25 hPa\"\n[container]\nbrimful = \"345 mL\"\nfill = \"330 mL\"\n"
      "stretch = \"1 %/bar\"\n[target]\nCO2 = \"2.6 vol ± 0.1 vol\"\n[gauge]\npiercer_volume = "
      "\"10 mL\"\n";
  const auto b = bound(soft);
  const auto rigid = bound(package("[gauge]\npiercer_volume = \"10 mL\"\n"));
  CHECK(content(b, reading(4, 3)) > content(rigid, reading(4, 3)));
  const ReadingModel model(b.binding.problem, b.gas, b.measure);
  const auto t = from_si<Temperature>(kZero + 4);
  const auto p = model.pressure(t, 2.6);
  REQUIRE(refused(p) == nullptr);
  CHECK(within_relative(std::get<double>(model.content({t, std::get<GaugePressure>(p), {}, {}})),
                        2.6, 1e-11));
}

TEST_CASE("the doubt of a reading is that of gauge, thermometer and laws") {
  const std::string gauge = "[gauge]\npressure = \"± 0.05 bar\"\ntemperature = \"± 0.3 K\"\n";
  const auto b =
      bound("[contact]\naltitude = \"350 m\"\n[target]\nCO2 = \"3.7 vol ± 0.1 vol\"\n" + gauge);
  const auto found = read_with_doubt(b.binding.problem, b, reading(4, 1.6));
  REQUIRE(refused(found) == nullptr);
  const auto& read = std::get<ReadContent>(found);
  const auto r = answered(
      "[contact]\ntemperature = \"4 degC ± 0.3 K\"\npressure = \"1.6 bar gauge ± 0.05 bar\"\n"
      "altitude = \"350 m\"\n");
  // The same doubts moved in the same way, but for the record of ambient pressure.
  CHECK(within_relative(read.u, r.answer.gases[0].volumes.u.value(), 1e-6));
  REQUIRE(read.budget.size() >= 3);
  CHECK(read.budget[0].input == "gauge.pressure");
}

TEST_CASE("a card's limits are inside the acceptance zone, and the next mark is not") {
  const std::string base =
      "[liquid]\nlike = \"soft drink\"\n[contact]\naltitude = \"350 m\"\n[target]\nCO2 = \"3.70 "
      "vol "
      "± 0.15 vol\"\n[card]\nfrom = \"34 degF\"\nto = \"60 degF\"\nstep = \"2 degF\"\n";
  const std::string gauge =
      "[gauge]\npressure = \"± 0.25 psi\"\ntemperature = \"± 0.2 K\"\ngraduation = \"0.5 psi\"\n"
      "offset = { pressure = \"-0.3 psi\" }\n";
  for (const std::string rule : {"guarded", "simple"}) {
    const std::string text = base + gauge + "[judging]\nrule = \"" + rule + "\"\n";
    const auto made = card_of(text);
    REQUIRE(made.rows.size() == 14);
    CHECK(made.complete);
    const auto b = bound(text);
    const auto& psi = *find_unit("psi", Dimension::pressure);
    const auto& fahrenheit = *find_unit("degF", Dimension::temperature);
    const auto verdict = [&](double shown, double gauge_psi) {
      const GaugeReading r{from_si<Temperature>(shown * fahrenheit.factor + fahrenheit.offset),
                           from_si<GaugePressure>(gauge_psi * psi.factor),
                           {},
                           {}};
      const auto found = read_with_doubt(b.binding.problem, b, r);
      REQUIRE(refused(found) == nullptr);
      const auto& y = std::get<ReadContent>(found);
      return judge(y.value, y.u, b.accepted, b.rule).verdict;
    };
    for (const auto& row : made.rows) {
      INFO(rule << " at " << row.shown);
      REQUIRE(row.lowest);
      REQUIRE(row.highest);
      CHECK(verdict(row.shown, *row.lowest) == Verdict::inside);
      CHECK(verdict(row.shown, *row.highest) == Verdict::inside);
      CHECK(verdict(row.shown, *row.lowest - 0.5) != Verdict::inside);
      CHECK(verdict(row.shown, *row.highest + 0.5) != Verdict::inside);
      CHECK(std::abs(*row.target * 2 - std::round(*row.target * 2)) <= 1e-12);
      CHECK(*row.target >= *row.lowest);
      CHECK(*row.target <= *row.highest);
    }
  }
}

TEST_CASE("a card by hand: water, one limit, sea level") {
  // A maximum of 2.6 vol allows up to the mark below the pressure that the report gives for it.
  const auto made = card_of(
      "[contact]\nambient = \"1013.25 hPa\"\n[target]\nCO2 = { max = \"2.6 vol\" }\n"
      "[card]\nfrom = \"4 degC\"\nto = \"4 degC\"\nstep = \"1 K\"\n[judging]\nrule = \"simple\"\n");
  REQUIRE(made.rows.size() == 1);
  CHECK_FALSE(made.rows[0].lowest);
  CHECK_FALSE(made.rows[0].target);
  const auto r = answered(
      "[contact]\nambient = \"1013.25 hPa\"\ntemperature = \"4 degC\"\n[target]\nCO2 = \"2.6 "
      "vol\"\n");
  const double exact = r.answer.pressure_gauge.value.above_ambient().value() / kBar;
  CHECK(*made.rows[0].highest <= exact);
  CHECK(*made.rows[0].highest > exact - 0.01);
}

TEST_CASE("instruments that are too coarse leave no window, and the card says what would") {
  const auto made = card_of(
      "[contact]\naltitude = \"350 m\"\n[target]\nCO2 = \"3.70 vol ± 0.05 vol\"\n[gauge]\npressure "
      "= "
      "\"± 0.2 bar\"\ntemperature = \"± 1 K\"\n[card]\nfrom = \"4 degC\"\nto = \"8 degC\"\nstep = "
      "\"2 K\"\n");
  CHECK_FALSE(made.complete);
  for (const auto& row : made.rows) CHECK(row.empty);
  CHECK(made.advice.by != Advice::By::nothing);
}

TEST_CASE("a graduation too coarse for the window is said") {
  const auto made = card_of(
      "[contact]\naltitude = \"350 m\"\n[target]\nCO2 = \"3.70 vol ± 0.02 "
      "vol\"\n[gauge]\ngraduation "
      "= \"5 psi\"\n[judging]\nrule = \"simple\"\n[card]\nfrom = \"4 degC\"\nto = \"6 degC\"\nstep "
      "= \"2 K\"\n");
  CHECK(made.rows[0].between_marks);
  CHECK_FALSE(made.complete);
}

TEST_CASE("a card says all that it lacks") {
  const auto codes = card_refusals("[target]\nCO2 = \"3.7 vol\"\n");
  CHECK(std::find(codes.begin(), codes.end(), "card-missing") != codes.end());
  CHECK(std::find(codes.begin(), codes.end(), "card-without-tolerance") != codes.end());
  const auto find = card_refusals(
      "[gas]\nCO2 = \"find\"\nN2 = \"rest\"\n[contact]\ntemperature = \"4 degC\"\npressure = \"2 "
      "bar "
      "gauge\"\n[target]\nCO2 = \"3.7 vol ± 0.1 vol\"\n[card]\nfrom = \"4 degC\"\nto = \"6 "
      "degC\"\nstep "
      "= \"2 K\"\n");
  CHECK(find == std::vector<std::string>{"readings-find"});
}
