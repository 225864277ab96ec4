// The units of the grammar. A new unit is one row.
#include <algorithm>
#include <array>

#include "capsigh/quantity/grammar.hpp"

namespace capsigh {
namespace {

using enum Dimension;

// Factors are exact by definition: the international pound (0.45359237 kg) and inch (0.0254 m), the
// standard acceleration of free fall (9.80665 m/s²), the atmosphere (101325 Pa), the conventional
// millimetre of mercury (13.5951 g/cm³), the US gallon (231 in³), the imperial gallon (4.54609 L),
// the US beer barrel (31 US gal) and the UK barrel (36 imperial gal), and the degree Fahrenheit
// (5/9 K from 459.67 below its zero).
constexpr double kPound = 0.45359237;
constexpr double kInch = 0.0254;
constexpr double kFoot = 12 * kInch;
constexpr double kPsi = kPound * 9.80665 / (kInch * kInch);
constexpr double kMercury = 13595.1 * 9.80665;  // Pa per metre
constexpr double kUsGallon = 231 * kInch * kInch * kInch;
constexpr double kImperialGallon = 4.54609e-3;
constexpr double kFahrenheit = 5.0 / 9.0;
constexpr double kCelsiusZero = 273.15;
constexpr double kFahrenheitZero = 459.67 * 5.0 / 9.0;
constexpr double kMinute = 60;
constexpr double kHour = 3600;
constexpr double kDay = 24 * kHour;

constexpr auto kUnits = std::to_array<Unit>({
    {"bar", pressure, 1e5},
    {"barg", pressure, 1e5, 0, Reference::gauge},
    {"bara", pressure, 1e5, 0, Reference::absolute},
    {"mbar", pressure, 1e2},
    {"hPa", pressure, 1e2},
    {"kPa", pressure, 1e3},
    {"MPa", pressure, 1e6},
    {"Pa", pressure, 1},
    {"psi", pressure, kPsi},
    {"psig", pressure, kPsi, 0, Reference::gauge},
    {"psia", pressure, kPsi, 0, Reference::absolute},
    {"atm", pressure, 101325},
    {"mmHg", pressure, kMercury * 1e-3},
    {"inHg", pressure, kMercury* kInch},
    {"degC", temperature, 1, kCelsiusZero},
    {"°C", temperature, 1, kCelsiusZero},
    {"degF", temperature, kFahrenheit, kFahrenheitZero},
    {"°F", temperature, kFahrenheit, kFahrenheitZero},
    {"K", temperature, 1},
    {"K", temperature_difference, 1},
    {"degC", temperature_difference, 1},
    {"°C", temperature_difference, 1},
    {"degF", temperature_difference, kFahrenheit},
    {"°F", temperature_difference, kFahrenheit},
    {"m3", volume, 1},
    {"m³", volume, 1},
    {"hL", volume, 1e-1},
    {"L", volume, 1e-3},
    {"cL", volume, 1e-5},
    {"mL", volume, 1e-6},
    {"US gal", volume, kUsGallon},
    {"US fl oz", volume, kUsGallon / 128},
    {"US bbl", volume, 31 * kUsGallon},
    {"imp gal", volume, kImperialGallon},
    {"imp fl oz", volume, kImperialGallon / 160},
    {"UK bbl", volume, 36 * kImperialGallon},
    {"m", length, 1},
    {"cm", length, 1e-2},
    {"mm", length, 1e-3},
    {"in", length, kInch},
    {"ft", length, kFoot},
    {"kg", mass, 1},
    {"g", mass, 1e-3},
    {"mg", mass, 1e-6},
    {"ug", mass, 1e-9},
    {"lb", mass, kPound},
    {"oz", mass, kPound / 16},
    {"%", fraction, 1e-2},
    {"vol", gas_volumes, 1},
    {"g/L", mass_concentration, 1},
    {"mg/L", mass_concentration, 1e-3},
    {"ug/L", mass_concentration, 1e-6},
    {"µg/L", mass_concentration, 1e-6},
    {"g/100 mL", mass_concentration, 10},
    {"kg/hL", mass_concentration, 10},
    {"kg/m3", density, 1},
    {"g/mL", density, 1e3},
    {"g/cm3", density, 1e3},
    {"mol/L", amount_concentration, 1e3},
    {"mmol/L", amount_concentration, 1},
    {"mol/kg", molality, 1},
    {"mmol/kg", molality, 1e-3},
    {"% w/w", mass_fraction, 1e-2},
    {"g/kg", mass_fraction, 1e-3},
    {"mg/kg", mass_fraction, 1e-6},
    {"ppm", mass_fraction, 1e-6},
    {"ppb", mass_fraction, 1e-9},
    {"Brix", sugar_scale, 1e-2},
    {"°Brix", sugar_scale, 1e-2},
    {"°Bx", sugar_scale, 1e-2},
    {"Plato", sugar_scale, 1e-2},
    {"°P", sugar_scale, 1e-2},
    {"% v/v", volume_fraction, 1e-2},
    {"% vol", volume_fraction, 1e-2},
    {"s", duration, 1},
    {"min", duration, kMinute},
    {"h", duration, kHour},
    {"d", duration, kDay},
    {"wk", duration, 7 * kDay},
    {"m2", area, 1},
    {"cm2", area, 1e-4},
    {"kg/h", mass_flow, 1 / kHour},
    {"g/s", mass_flow, 1e-3},
    {"lb/h", mass_flow, kPound / kHour},
    {"m3/h", volume_flow, 1 / kHour},
    {"hL/h", volume_flow, 1e-1 / kHour},
    {"L/min", volume_flow, 1e-3 / kMinute},
    {"ft3/min", volume_flow, kFoot* kFoot* kFoot / kMinute},
    {"m3/h normal", normal_volume_flow, 1 / kHour},
    {"1/s", rate, 1},
    {"1/min", rate, 1 / kMinute},
    {"1/h", rate, 1 / kHour},
    {"1/d", rate, 1 / kDay},
    {"%/bar", stretch, 1e-2 / 1e5},
    {"%/psi", stretch, 1e-2 / kPsi},
    {"mL/d", transmission, 1e-6 / kDay},
    {"cm3/d", transmission, 1e-6 / kDay},
    {"uL/d", transmission, 1e-9 / kDay},
});

}  // namespace

std::span<const Unit> unit_table() { return kUnits; }

const Unit* find_unit(std::string_view text, Dimension dimension) {
  const auto* it = std::find_if(kUnits.begin(), kUnits.end(), [&](const Unit& u) {
    return u.dimension == dimension && u.text == text;
  });
  return it == kUnits.end() ? nullptr : it;
}

std::string_view dimension_name(Dimension d) {
  switch (d) {
    case pressure: return "pressure";
    case temperature: return "temperature";
    case temperature_difference: return "temperature difference";
    case volume: return "volume";
    case length: return "length";
    case mass: return "mass";
    case fraction: return "fraction";
    case gas_volumes: return "volumes of gas";
    case mass_concentration: return "mass concentration";
    case amount_concentration: return "amount concentration";
    case molality: return "molality";
    case mass_fraction: return "mass fraction";
    case sugar_scale: return "Brix or Plato";
    case volume_fraction: return "volume fraction";
    case density: return "density";
    case duration: return "time";
    case area: return "area";
    case mass_flow: return "mass flow";
    case volume_flow: return "volume flow";
    case normal_volume_flow: return "normal volume flow of gas";
    case rate: return "rate";
    case stretch: return "stretch";
    case transmission: return "transmission of gas";
  }
  return "quantity";
}

}  // namespace capsigh
