#include "capsigh/answer/monte_carlo.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <memory>

#include "capsigh/answer/solve.hpp"
#include "capsigh/quality/monte_carlo.hpp"
#include "capsigh/quantity/grammar.hpp"

namespace capsigh {
namespace {

// A watched target by the place of its figure among all.
struct Watch {
  std::size_t slot = 0;
  double divisor = 1;
  Interval accepted;
};

// A case of its own, whose doubts a thread may move. The values are all figures, then 1 or 0 for
// each watched target: whether it conforms.
struct Drawn {
  Drawn(const Case& c, const std::vector<Watch>& watched)
      : problem(c), doubts(each_doubt(problem)), watches(watched) {}
  Drawn(const Drawn&) = delete;
  Drawn& operator=(const Drawn&) = delete;
  Drawn(Drawn&&) = delete;
  Drawn& operator=(Drawn&&) = delete;
  ~Drawn() = default;

  void operator()(std::span<const double> z, std::span<double> values) {
    for (std::size_t i = 0; i < doubts.size(); ++i) *doubts[i].z = z[i];
    std::fill(values.begin(), values.end(), std::numeric_limits<double>::quiet_NaN());
    const auto solved = solve(problem);
    if (refused(solved) != nullptr) return;
    std::size_t slot = 0;
    const std::size_t figures = values.size() - watches.size();
    each_figure(std::get<Answer>(solved),
                [&](const FigurePath&, const auto& figure, const JsonUnit&) {
                  if (slot < figures && figure.asked) values[slot] = si_value(figure.value);
                  ++slot;
                });
    for (std::size_t w = 0; w < watches.size(); ++w) {
      const double content = values[watches[w].slot] / watches[w].divisor;
      if (!std::isnan(content)) {
        values[figures + w] = watches[w].accepted.contains(content) ? 1.0 : 0.0;
      }
    }
  }

  Case problem;
  std::vector<Doubt> doubts;
  std::vector<Watch> watches;
};

std::vector<Watch> watches_of(const std::vector<WatchedTarget>& watched, const Answer& answer) {
  std::vector<Watch> watches;
  for (const auto& target : watched) {
    Watch watch{0, target.divisor, target.accepted};
    std::size_t slot = 0;
    each_figure(answer, [&](const FigurePath& path, const auto&, const JsonUnit&) {
      if (path.text() == target.path) watch.slot = slot;
      ++slot;
    });
    watches.push_back(watch);
  }
  return watches;
}

std::string number(double share) { return significant(100 * share, 2); }

Finding caution(std::string code, std::string message) {
  Finding f;
  f.severity = Severity::caution;
  f.code = std::move(code);
  f.message = std::move(message);
  return f;
}

// Figures of the same kind of trouble, in one sentence.
void name_figures(const std::vector<std::string>& figures, std::string code, std::string message,
                  Findings& to) {
  if (figures.empty()) return;
  constexpr std::size_t most = 4;
  const auto shown = std::min(figures.size(), most);
  std::string names;
  for (std::size_t i = 0; i < shown; ++i) names += (i == 0 ? "" : ", ") + figures[i];
  if (figures.size() > shown) names += fmt::format(" and {} more", figures.size() - shown);
  to.push_back(caution(std::move(code), names + ": " + std::move(message)));
}

}  // namespace

MonteCarloRun monte_carlo(const Case& c, Answer& answer, const MonteCarloOptions& options,
                          const std::vector<WatchedTarget>& watched, double coverage,
                          double most_unanswered, double agreement) {
  std::vector<Shape> shapes;
  Case listed = c;
  for (const auto& doubt : each_doubt(listed)) shapes.push_back(doubt.shape);
  std::size_t slots = 0;
  each_figure(answer, [&](const FigurePath&, const auto&, const JsonUnit&) { ++slots; });
  const auto watches = watches_of(watched, answer);
  const ModelMaker make = [&c, &watches] {
    return [drawn = std::make_shared<Drawn>(c, watches)](
               std::span<const double> z, std::span<double> values) { (*drawn)(z, values); };
  };
  SamplingPlan plan{options.draws, options.seed, options.threads, coverage, options.progress};
  const auto sampled = sample(make, shapes, slots + watches.size(), plan);

  MonteCarloRun run{options.draws, options.seed, options.draws, coverage, {}, {}};
  for (std::size_t w = 0; w < watches.size(); ++w)
    run.conforming.push_back(sampled[slots + w].mean);
  std::vector<std::string> without;
  std::vector<std::string> bent;
  std::size_t slot = 0;
  const auto drawn = static_cast<double>(options.draws);
  each_figure(answer, [&](const FigurePath& path, auto& figure, const JsonUnit&) {
    const auto& s = sampled[slot++];
    if (!figure.asked) return;
    using Value = std::decay_t<decltype(figure.value)>;
    using Step = std::decay_t<decltype(figure.u)>;
    const std::uint64_t unanswered = options.draws - s.answered;
    run.unanswered = std::min(run.unanswered, unanswered);
    const double first = si_value(figure.u);
    if (!(first > 0)) return;  // nothing doubtful enters
    figure.u_first = figure.u;
    figure.doubt_known = static_cast<double>(unanswered) <= most_unanswered * drawn;
    if (!figure.doubt_known) {
      without.push_back(path.text());
      figure.u = Step{};
      return;
    }
    figure.u = from_si<Step>(s.u);
    figure.low = from_si<Value>(s.low);
    figure.high = from_si<Value>(s.high);
    if (std::abs(s.u / first - 1) <= agreement) return;
    figure.nonlinear = true;
    bent.push_back(path.text());
  });
  name_figures(without, "draws-without-answer",
               fmt::format("more than {} % of the draws have no answer, so no uncertainty is given",
                           number(most_unanswered)),
               run.cautions);
  name_figures(bent, "not-linear",
               fmt::format("the drawn uncertainty differs from first order by more than {} %; the "
                           "drawn one stands",
                           number(agreement)),
               run.cautions);
  return run;
}

}  // namespace capsigh
