// Published sets against the program, set by set: what the tests judge and what capsigh_evaluate
// prints.
#pragma once

#include <string>
#include <vector>

namespace capsigh::test {

/// One comparison: how far a published value lies from ours, both relative (or both absolute), and
/// our standard uncertainty with whatever is added to it.
struct Point {
  double deviation = 0;
  double u = 0;
  double celsius = 0;
};

struct SetResult {
  std::string name;
  std::string unit;  ///< of the deviations: "%" or a unit
  std::vector<Point> points;

  [[nodiscard]] double mean() const;
  [[nodiscard]] double worst() const;
  /// Share of the points inside ± k u.
  [[nodiscard]] double inside(double k) const;
};

SetResult weiss_table3();
SetResult g704_checks();
/// One set of co2_in_water.csv by its name.
SetResult co2_in_water(const std::string& set);
/// The sets on which the widths are judged, pooled.
SetResult co2_pooled();
SetResult harned_davis_salt();
SetResult malinin_ratios();
SetResult gerecke();
SetResult crc_co2();
SetResult oxygen_saturation();
SetResult other_gases();
SetResult second_virials();
SetResult oiml_density();
SetResult sucrose_density();
SetResult ethanol_vapour();
SetResult ethanol_boiling();
SetResult asbc();
SetResult mebak();
SetResult oiv();

std::vector<SetResult> all_sets();

}  // namespace capsigh::test
