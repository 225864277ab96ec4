#include "published/evaluation.hpp"

#include <algorithm>
#include <cmath>

#include "capsigh/balance/contact.hpp"
#include "capsigh/models/relation_asbc.hpp"
#include "capsigh/models/relation_mebak.hpp"
#include "capsigh/models/relation_oiv.hpp"
#include "support.hpp"

namespace capsigh::test {
namespace {

constexpr double kAtm = 101325;
constexpr double kIdealLitre = 22.41396954e-3;  // m³/mol at 0 °C and 1 atm

// What the program says a gas holds: content b (mol/kg), its u, and the liquid's density at T.
struct Said {
  double b = 0;
  double u = 0;
  double density = 0;
  double partial = 0;  // Pa
};

Said said(const std::string& gas, const std::string& liquid, double kelvin, double pascal,
          bool total) {
  const std::string head = liquid + "[gas]\n" + gas + " = \"100 %\"\n[contact]\ntemperature = \"" +
                           fmt::format("{:.6f}", kelvin) + " K\"\n";
  const auto with = [&](double p) {
    return answered(head + "pressure = \"" + fmt::format("{:.6f}", p) + " Pa abs\"\n");
  };
  double p = pascal;
  if (!total) p += si_value(with(2e5).answer.vapour.value);
  const auto report = with(p);
  const auto& g = report.answer.gases[0];
  const Medium m = medium(gas + " = \"100 %\"");
  Said s;
  const double molar_mass = m.gases[0].molar_mass.law.value.value();
  s.b = si_value(g.mass_fraction.value) / molar_mass;
  s.u = si_value(g.mass_fraction.u) / si_value(g.mass_fraction.value);
  s.density = m.liquid.water_density.law(from_si<Temperature>(kelvin)).value();
  s.partial = p - si_value(report.answer.vapour.value);
  return s;
}

// A printed quantity as a content b in pure water at the pressure of the measurement.
double as_content(const std::string& quantity, double value, const Said& s, double kelvin) {
  const double r = 8.314462618;
  if (quantity == "bunsen") return value / kIdealLitre / s.density * s.partial / kAtm;
  if (quantity == "stp_per_volume") return value / kIdealLitre / s.density;
  if (quantity == "ostwald") return value * s.partial / (r * kelvin) / s.density;
  if (quantity == "molality_per_atm") return value * s.partial / kAtm;
  if (quantity == "mol_per_litre_atm") return value * 1e3 * s.partial / kAtm / s.density;
  if (quantity == "mole_fraction") return value / (1 - value) / 18.015268e-3;
  throw std::logic_error("no quantity " + quantity);
}

std::string salt(const std::string& formula, const std::string& amount) {
  return "[liquid]\nsalts = { " + formula + " = \"" + amount + "\" }\n";
}

constexpr double kNaCl = 58.443e-3;  // kg/mol

std::string sodium_chloride_molal(double m) {
  return salt("NaCl", fmt::format("{:.8f} % w/w", 100 * m * kNaCl / (1 + m * kNaCl)));
}

double celsius_of(const Row& row) { return number(row, "T_K") - 273.15; }

}  // namespace

double SetResult::mean() const {
  double sum = 0;
  for (const auto& p : points) sum += p.deviation;
  return sum / static_cast<double>(points.size());
}

double SetResult::worst() const {
  double worst = 0;
  for (const auto& p : points) {
    if (std::abs(p.deviation) > std::abs(worst)) worst = p.deviation;
  }
  return worst;
}

double SetResult::inside(double k) const {
  const auto count = std::count_if(points.begin(), points.end(), [&](const Point& p) {
    return std::abs(p.deviation) <= k * p.u;
  });
  return static_cast<double>(count) / static_cast<double>(points.size());
}

SetResult weiss_table3() {
  const auto& library = built_in_library();
  const auto& k0 = library.at("henry.CO2.weiss1974");
  const auto& salinity = library.at("henry.CO2.weiss1974_salinity");
  const ThreeTermHenry law{{k0.values[0].value, k0.values[1].value, k0.values[2].value}, k0.factor};
  const SalinityOnHenry salted{
      {salinity.values[0].value, salinity.values[1].value, salinity.values[2].value}};
  SetResult set{"Weiss 1974 Table III, 1e-5 mol/(kg atm)", "1e-5", {}};
  for (const auto& row : table("weiss1974_table3.csv")) {
    const auto t = from_si<Temperature>(number(row, "T_K"));
    const double ours =
        law.per_mass(t).value() * kAtm * std::exp(salted.ln_change(t, number(row, "S")));
    set.points.push_back({(number(row, "K0") - ours) * 1e5, 0.5, celsius_of(row)});
  }
  return set;
}

SetResult g704_checks() {
  const auto& library = built_in_library();
  const auto vapour = WaterVapourPressure::from(library.at("vapour.water"));
  SetResult set{"IAPWS G7-04 check values, ln(kH/GPa)", "1", {}};
  for (const auto& row : table("g704_check.csv")) {
    const auto& record = library.at("henry." + row.at("gas") + ".g704");
    const HighTemperatureHenry law{
        {record.values[0].value, record.values[1].value, record.values[2].value},
        vapour.critical_temperature,
        {}};
    const auto t = from_si<Temperature>(number(row, "T_K"));
    const double ours = std::log(law.per_mole_fraction(t, vapour(t)).value() / 1e9);
    set.points.push_back({number(row, "ln_kH") - ours, 5e-5, celsius_of(row)});
  }
  return set;
}

SetResult co2_in_water(const std::string& name) {
  SetResult set{name, "%", {}};
  for (const auto& row : table("co2_in_water.csv")) {
    if (row.at("set") != name) continue;
    const double kelvin = number(row, "T_K");
    const double pascal = number(row, "p_kPa") * 1e3;
    if (pascal > 19.5e5) continue;  // beyond the gas law
    const auto s = said("CO2", "", kelvin, pascal, row.at("p_kind") == "total");
    const double measured = as_content(row.at("quantity"), number(row, "value"), s, kelvin);
    const double own = number(row, "own");
    set.points.push_back({100 * (measured / s.b - 1), 100 * std::hypot(s.u, own), celsius_of(row)});
  }
  return set;
}

SetResult co2_pooled() {
  SetResult pooled{"pooled: Murray & Riley, Harned & Davis, Findlay (2), Shedlovsky", "%", {}};
  for (const auto& name : {"Murray & Riley 1971", "Harned & Davis 1943", "Findlay & Howell 1915",
                           "Findlay & Shen 1912", "Shedlovsky & MacInnes 1935"}) {
    const auto set = co2_in_water(name);
    pooled.points.insert(pooled.points.end(), set.points.begin(), set.points.end());
  }
  return pooled;
}

SetResult harned_davis_salt() {
  SetResult set{"Harned & Davis 1943, NaCl to 1 mol/kg", "%", {}};
  for (const auto& row : table("harned_davis1943_nacl.csv")) {
    const double m = number(row, "m");
    if (m > 1) continue;
    const double kelvin = number(row, "T_K");
    const auto s = said("CO2", sodium_chloride_molal(m), kelvin, kAtm, false);
    // The program's content is per kg of solution without gas, the paper's per kg of water.
    const double per_water = s.b * (1 + m * kNaCl);
    const double measured = number(row, "S") * s.partial / kAtm;
    set.points.push_back({100 * (measured / per_water - 1), 100 * s.u, celsius_of(row)});
  }
  return set;
}

SetResult malinin_ratios() {
  SetResult set{"Malinin & Savelyeva 1972, NaCl, ratio to water", "%", {}};
  std::map<std::string, std::pair<double, int>> water;
  const auto rows = table("malinin1972_nacl.csv");
  for (const auto& row : rows) {
    if (number(row, "c") > 0) continue;
    water[row.at("T_K")].first += number(row, "value");
    water[row.at("T_K")].second += 1;
  }
  for (const auto& row : rows) {
    if (!(number(row, "c") > 0)) continue;
    const double kelvin = number(row, "T_K");
    const auto pure = said("CO2", "", kelvin, 1e5, false);
    const auto salted = said("CO2", salt("NaCl", row.at("c") + " mol/L"), kelvin, 1e5, false);
    const auto& [sum, count] = water[row.at("T_K")];
    // Basis of the page not stated; compared as amount per mass of solution.
    const double measured = number(row, "value") / (sum / count);
    const double ours = salted.b / pure.b;
    const double u = std::sqrt(std::max(salted.u * salted.u - pure.u * pure.u, 0.0));
    set.points.push_back({100 * (measured / ours - 1), 100 * u, celsius_of(row)});
  }
  return set;
}

SetResult gerecke() {
  SetResult set{"Gerecke 1969, KCl (poor set)", "%", {}};
  for (const auto& row : table("gerecke1969_kcl.csv")) {
    const double kelvin = number(row, "T_K");
    const double c = number(row, "c");
    const auto s =
        said("CO2", c > 0 ? salt("KCl", row.at("c") + " mol/L") : "", kelvin, kAtm, false);
    // Per volume of solution at T: the solution's density, KCl adds about 45 kg/m³ per mol/L.
    const double density = s.density + 45 * c;
    const double measured = number(row, "bunsen") / kIdealLitre / density * s.partial / kAtm;
    set.points.push_back({100 * (measured / s.b - 1), 100 * s.u, celsius_of(row)});
  }
  return set;
}

SetResult crc_co2() {
  SetResult set{"CRC table of CO2 in water (2 %, and rounding)", "%", {}};
  for (const auto& row : table("crc_co2.csv")) {
    const double x = number(row, "x");
    const auto s = said("CO2", "", number(row, "T_K"), number(row, "p_kPa") * 1e3, false);
    const double measured = as_content("mole_fraction", x, s, number(row, "T_K"));
    // 2 % as a rectangular limit, and half of the last digit (1e-6), rectangular too.
    const double own = std::hypot(0.02, 0.5e-6 / x) / std::sqrt(3.0);
    set.points.push_back({100 * (measured / s.b - 1), 100 * std::hypot(s.u, own), celsius_of(row)});
  }
  return set;
}

SetResult oxygen_saturation() {
  SetResult set{"O2 in air-saturated water, Benson & Krause", "%", {}};
  for (const auto& row : table("o2_saturation.csv")) {
    const double kelvin = number(row, "T_K");
    const auto report =
        answered("[gas]\nair = \"100 %\"\n[contact]\ntemperature = \"" +
                 fmt::format("{:.2f}", kelvin) + " K\"\npressure = \"101325 Pa abs\"\n");
    const Medium m = medium("air = \"100 %\"");
    for (const auto& g : report.answer.gases) {
      if (g.gas != "O2") continue;
      const double density = m.liquid.water_density.law(from_si<Temperature>(kelvin)).value();
      const double ours = si_value(g.mass_fraction.value) * density * 1e3;
      const double u = si_value(g.mass_fraction.u) / si_value(g.mass_fraction.value);
      set.points.push_back({100 * (number(row, "mg_per_L") / ours - 1), 100 * u, celsius_of(row)});
    }
  }
  return set;
}

SetResult other_gases() {
  SetResult set{"other gases, evaluated mole fractions (CRC/IUPAC)", "%", {}};
  for (const auto& row : table("other_gases.csv")) {
    const double kelvin = number(row, "T_K");
    const auto s = said(row.at("gas"), "", kelvin, kAtm, false);
    const double measured = as_content("mole_fraction", number(row, "x"), s, kelvin);
    set.points.push_back({100 * (measured / s.b - 1), 100 * s.u, celsius_of(row)});
  }
  return set;
}

SetResult second_virials() {
  SetResult set{"second virial coefficients, cm3/mol", "cm3/mol", {}};
  for (const auto& row : table("second_virial.csv")) {
    const double kelvin = number(row, "T_K");
    const Medium m = medium(row.at("gas") + " = \"100 %\"");
    const auto& range = m.gases[0].virial_doubt.record->range;
    if (!within(range, {from_si<Temperature>(kelvin), std::nullopt})) continue;
    const auto at = at_temperature(m, liquid_of(m), from_si<Temperature>(kelvin));
    set.points.push_back({number(row, "B") - at.b[0].value() * 1e6, 1e6 * m.gases[0].virial_doubt.u,
                          celsius_of(row)});
  }
  return set;
}

SetResult oiml_density() {
  SetResult set{"OIML R22 density of ethanol-water, kg/m3", "kg/m3", {}};
  const auto law = EthanolWaterDensity::from(built_in_library().at("density.ethanol_water"),
                                             from_si<Temperature>(273.15));
  for (const auto& row : table("oiml_r22.csv")) {
    const auto p = law.by_mass(Fraction(number(row, "vol_percent") / 100), celsius(20));
    const double ours = law(p, celsius(number(row, "t_C"))).value();
    set.points.push_back({number(row, "rho") - ours, 0.005, number(row, "t_C")});
  }
  return set;
}

SetResult sucrose_density() {
  SetResult set{"sucrose solutions to 30 %, kg/m3", "kg/m3", {}};
  for (const auto& row : table("sucrose_density.csv")) {
    const auto c = binding("[liquid]\nsucrose = \"" + row.at("percent") +
                           " % w/w\"\n[contact]\ntemperature = \"20 degC\"\npressure = \"2 bar "
                           "abs\"\n")
                       .problem;
    const double ours = liquid_of(c.medium).density.value();
    set.points.push_back({number(row, "rho") - ours, 0.1, 20});
  }
  return set;
}

namespace {

Medium wine() {
  return binding(
             "[liquid]\nethanol = \"12 % v/v\"\n[contact]\ntemperature = \"20 degC\"\n"
             "pressure = \"2 bar abs\"\n")
      .problem.medium;
}

}  // namespace

SetResult ethanol_vapour() {
  SetResult set{"vapour pressure of ethanol (same equation)", "%", {}};
  const Medium m = wine();
  for (const auto& row : table("ethanol_vapour.csv")) {
    const double ours = m.liquid.ethanol_vapour.law(celsius(number(row, "t_C"))).value();
    set.points.push_back({100 * (number(row, "p") / ours - 1), 0.5, number(row, "t_C")});
  }
  return set;
}

SetResult ethanol_boiling() {
  SetResult set{"boiling ethanol-water, total pressure 101.325 kPa", "%", {}};
  const Medium m = wine();
  for (const auto& row : table("ethanol_vle.csv")) {
    const double x = number(row, "x");
    const auto t = celsius(number(row, "t_C"));
    const double water =
        (1 - x) * m.liquid.van_laar.water(x) * m.liquid.water_vapour.law(t).value();
    const double ethanol =
        x * m.liquid.van_laar.ethanol(x) * m.liquid.ethanol_vapour.law(t).value();
    set.points.push_back({100 * (kAtm / (water + ethanol) - 1), 3, number(row, "t_C")});
  }
  return set;
}

SetResult asbc() {
  SetResult set{"ASBC table regression, vol", "vol", {}};
  const auto law = AsbcRelation::from(built_in_library().at("relation.asbc"));
  for (const auto& row : table("asbc.csv")) {
    const double kelvin = (number(row, "t_F") + 459.67) * 5 / 9;
    const double pascal = (number(row, "psig") + 14.695) * 6894.757293168361;
    const double ours = law(from_si<Temperature>(kelvin), from_si<Pressure>(pascal)).value();
    set.points.push_back({number(row, "vol") - ours, 0.0005, kelvin - 273.15});
  }
  return set;
}

SetResult mebak() {
  SetResult set{"MEBAK relation, g/kg", "g/kg", {}};
  const auto law = MebakRelation::from(built_in_library().at("relation.mebak"));
  for (const auto& row : table("mebak.csv")) {
    const double ours = 1e3 * law(celsius(number(row, "t_C")), bar(1)).value();
    set.points.push_back({number(row, "g_per_kg") - ours, 0.00005, number(row, "t_C")});
  }
  return set;
}

SetResult oiv() {
  SetResult set{"OIV relation, g/L", "g/L", {}};
  const auto law =
      OivRelation::from(built_in_library().at("relation.oiv"), from_si<GasConstant>(8.314462618));
  for (const auto& row : table("oiv.csv")) {
    const double ours = law(celsius(20), bar(1), Fraction(number(row, "A") / 100),
                            from_si<MassConcentration>(number(row, "S")))
                            .value();
    set.points.push_back({number(row, "g_per_L") - ours, 0.00005, 20});
  }
  return set;
}

std::vector<SetResult> all_sets() {
  std::vector<SetResult> sets{weiss_table3(), g704_checks()};
  for (const auto& name : {"Murray & Riley 1971", "Harned & Davis 1943", "Findlay & Howell 1915",
                           "Findlay & Shen 1912", "Shedlovsky & MacInnes 1935"}) {
    sets.push_back(co2_in_water(name));
  }
  sets.push_back(co2_pooled());
  for (const auto& name : {"Kunerth 1922", "Khanikof & Louguinine 1867", "Kritschewsky 1935"}) {
    sets.push_back(co2_in_water(name));
  }
  for (auto* set : {crc_co2, harned_davis_salt, malinin_ratios, gerecke, oxygen_saturation,
                    other_gases, second_virials, oiml_density, sucrose_density, ethanol_vapour,
                    ethanol_boiling, asbc, mebak, oiv}) {
    sets.push_back(set());
  }
  return sets;
}

}  // namespace capsigh::test
