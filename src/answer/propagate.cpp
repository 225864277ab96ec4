// Propagation by JCGM 100, first order, and where that is not enough.
#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>

#include "capsigh/answer/doubt.hpp"
#include "capsigh/answer/solve.hpp"

namespace capsigh {
namespace {

// A root is found to about 1e-15; smaller differences than this, of the value, are its noise.
constexpr double kNoise = 1e-12;

using Values = std::vector<double>;

// Every slot of an answer; one that was not asked is NaN, so that slots asked on one side of a
// doubt only are seen.
Values flatten(const Answer& answer) {
  Values values;
  each_figure(answer, [&](const FigurePath&, const auto& figure, const JsonUnit&) {
    values.push_back(figure.asked ? si_value(figure.value)
                                  : std::numeric_limits<double>::quiet_NaN());
  });
  return values;
}

// Solves with one doubt moved to z; an answer that is refused is NaN in every slot.
Values moved(Case& c, const Doubt& doubt, double z, std::size_t slots) {
  *doubt.z = z;
  const auto result = solve(c);
  *doubt.z = 0;
  if (refused(result) != nullptr) return Values(slots, std::numeric_limits<double>::quiet_NaN());
  return flatten(std::get<Answer>(result));
}

bool answered(const Values& values) {
  return std::any_of(values.begin(), values.end(), [](double x) { return std::isfinite(x); });
}

// How a shape weighs curvature and third order.
struct Moments {
  double square = 0;  ///< Var z²
  double cubic = 0;   ///< of (s_far − s)/s in u
  double far = 0;     ///< as far as the shape reaches, or two standard uncertainties
};

// With s = f' + f'''/6 the slope between −1 and 1, and s_far that between −far and far, u by third
// order is larger than s by (E z⁴/6 − 1/6) f'''/f', and s_far − s is (far² − 1) f'''/6. E z⁴ is 3
// for a normal z and 9/5 for a rectangular one.
Moments moments_of(Shape shape) {
  if (shape == Shape::rectangular) return {0.8, 0.8 / 2.0, std::sqrt(3.0)};
  return {2.0, 2.0 / 3.0, 2.0};
}

// The figures with every doubt moved by one standard uncertainty to either side.
class Moves {
 public:
  Moves(Case& c, const std::vector<Doubt>& doubts, const Values& best)
      : c_(c), doubts_(doubts), best_(best), variance_(best.size(), 0.0) {
    for (const auto& doubt : doubts) {
      up_.push_back(moved(c, doubt, 1.0, best.size()));
      down_.push_back(moved(c, doubt, -1.0, best.size()));
    }
    for (std::size_t d = 0; d < doubts.size(); ++d) {
      for (std::size_t i = 0; i < best.size(); ++i) variance_[i] += change(d, i) * change(d, i);
    }
  }

  [[nodiscard]] bool possible(std::size_t d) const {
    return answered(up_[d]) || answered(down_[d]);
  }

  // What one standard uncertainty moves a figure by: half the way from −1 to +1; one-sided where
  // only one side has an answer.
  [[nodiscard]] double change(std::size_t d, std::size_t i) const {
    const bool up = std::isfinite(up_[d][i]);
    const bool down = std::isfinite(down_[d][i]);
    if (!up && !down) return 0;
    const double high = up ? up_[d][i] : best_[i];
    const double low = down ? down_[d][i] : best_[i];
    return without_noise((high - low) / (up && down ? 2.0 : 1.0), i);
  }

  [[nodiscard]] double variance(std::size_t i) const { return variance_[i]; }

  // What first order leaves out of u, as a share of it, for every figure: curvature, third order
  // and the products of those doubts that matter. Infinite where a side has no answer.
  Values left_out() {
    Values extra(best_.size(), 0.0);
    std::vector<std::size_t> weighty;
    for (std::size_t d = 0; d < doubts_.size(); ++d) {
      for (std::size_t i = 0; i < best_.size(); ++i) extra[i] += 0.5 * curvature(d, i);
      if (matters(d)) weighty.push_back(d);
    }
    for (const auto d : weighty) add_third_order(d, extra);
    for (std::size_t a = 0; a < weighty.size(); ++a) {
      for (std::size_t b = a + 1; b < weighty.size(); ++b)
        add_product(weighty[a], weighty[b], extra);
    }
    return extra;
  }

 private:
  [[nodiscard]] double without_noise(double difference, std::size_t i) const {
    return std::abs(difference) > kNoise * std::abs(best_[i]) ? difference : 0.0;
  }
  [[nodiscard]] double share(std::size_t d, std::size_t i) const {
    return variance_[i] > 0 ? change(d, i) * change(d, i) / variance_[i] : 0.0;
  }
  [[nodiscard]] bool matters(std::size_t d) const {
    constexpr double weight = 0.04;
    for (std::size_t i = 0; i < best_.size(); ++i) {
      if (share(d, i) > weight) return true;
    }
    return false;
  }

  // Of ½ f''(z² − 1): ¼ f''² Var z², as a share of the variance.
  [[nodiscard]] double curvature(std::size_t d, std::size_t i) const {
    const bool up = std::isfinite(up_[d][i]);
    const bool down = std::isfinite(down_[d][i]);
    if (!std::isfinite(best_[i]) || (!up && !down)) return 0;
    if (!up || !down) return std::numeric_limits<double>::infinity();
    const double second = without_noise(up_[d][i] + down_[d][i] - 2 * best_[i], i);
    const double weight = 0.25 * moments_of(doubts_[d].shape).square;
    return variance_[i] > 0 ? weight * second * second / variance_[i] : 0.0;
  }

  void add_third_order(std::size_t d, Values& extra) {
    const auto shape = moments_of(doubts_[d].shape);
    const auto up = moved(c_, doubts_[d], shape.far, best_.size());
    const auto down = moved(c_, doubts_[d], -shape.far, best_.size());
    for (std::size_t i = 0; i < best_.size(); ++i) {
      const double near = change(d, i);
      if (near == 0) continue;
      const double far = (up[i] - down[i]) / (2 * shape.far);
      extra[i] += std::isfinite(far) ? share(d, i) * std::abs(shape.cubic * (far - near) / near)
                                     : std::numeric_limits<double>::infinity();
    }
  }

  // Of f_ab z_a z_b: f_ab².
  void add_product(std::size_t a, std::size_t b, Values& extra) {
    *doubts_[a].z = 1;
    const auto both = moved(c_, doubts_[b], 1.0, best_.size());
    *doubts_[a].z = 0;
    for (std::size_t i = 0; i < best_.size(); ++i) {
      const double product = without_noise(both[i] - up_[a][i] - up_[b][i] + best_[i], i);
      if (variance_[i] > 0 && std::isfinite(product)) {
        extra[i] += 0.5 * product * product / variance_[i];
      }
    }
  }

  Case& c_;
  const std::vector<Doubt>& doubts_;
  const Values& best_;
  Values variance_;
  std::vector<Values> up_;
  std::vector<Values> down_;
};

Finding too_wide(const Doubt& doubt) {
  Finding f;
  f.code = "doubt-too-wide";
  f.message =
      fmt::format("one standard uncertainty of {} to either side leads to no answer", doubt.name);
  f.expected = "a ± within which an answer exists";
  return f;
}

bool main_figure(const std::string& path) {
  // A course repeats the budget of its beginning, and its own rate's, at every moment.
  if (path.starts_with("opening.course.") && path.ends_with(".lost")) return true;
  if (path.find(".course.") != std::string::npos) return false;
  if (path.starts_with("opening.reclosed.dissolved")) return false;
  if (path.starts_with("conditioning.") || path.starts_with("supply.")) return true;
  return path.ends_with(".safe_temperature") || path.ends_with(".largest_fill") ||
         path.ends_with(".until_limit") || path.ends_with(".oxygen.total") ||
         path.ends_with(".allowed_air") || path.ends_with(".volumes") ||
         path.ends_with(".mass_concentration") || path.ends_with(".pressure_gauge") ||
         path == "condition.temperature" || path.starts_with("saturation.") ||
         path.starts_with("blend.") || path.ends_with("_loss");
}

// The lines of one figure, largest share first.
void add_lines(const std::string& of, const Moves& moves, const std::vector<Doubt>& doubts,
               std::size_t slot, double factor, std::vector<BudgetLine>& budget) {
  constexpr double negligible = 1e-6;
  const double variance = moves.variance(slot);
  const auto first = static_cast<std::ptrdiff_t>(budget.size());
  for (std::size_t d = 0; d < doubts.size(); ++d) {
    const double change = moves.change(d, slot);
    const double share = change * change / variance;
    if (share < negligible) continue;
    budget.push_back({of, doubts[d].name, doubts[d].u, doubts[d].unit, share,
                      std::abs(change) / factor, doubts[d].is_record});
  }
  std::sort(budget.begin() + first, budget.end(),
            [](const auto& a, const auto& b) { return a.share > b.share; });
}

}  // namespace

Propagation propagate(Case& c, Answer& answer) {
  const auto doubts = each_doubt(c);
  const auto best = flatten(answer);
  Moves moves(c, doubts, best);
  Propagation result;
  for (std::size_t d = 0; d < doubts.size(); ++d) {
    if (!moves.possible(d)) result.findings.push_back(too_wide(doubts[d]));
  }
  if (!result.findings.empty()) return result;
  const auto left_out = moves.left_out();
  std::size_t slot = 0;
  each_figure(answer, [&](const FigurePath& path, auto& figure, const JsonUnit& unit) {
    const double variance = moves.variance(slot);
    figure.u = from_si<std::decay_t<decltype(figure.u)>>(std::sqrt(variance));
    constexpr double bends = 0.01;
    figure.nonlinear = figure.asked && variance > 0 && left_out[slot] > bends;
    const std::string of = path.text();
    if (figure.asked && variance > 0 && main_figure(of)) {
      add_lines(of, moves, doubts, slot, unit.factor, result.budget);
    }
    ++slot;
  });
  return result;
}

}  // namespace capsigh
