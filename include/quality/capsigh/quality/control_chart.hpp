// Control charts of a stream of values, in constant memory, so that the charts of two stretches
// merge into exactly the chart of the whole.
//
// ISO 7870-2 knows two phases. *Limits established* (a centre and a standard deviation known from
// earlier): every point is tested as it comes. *Limits from the data*: they are known only at the
// end; they come from all values, and the tests look at the last kWindow of them.
//
// Subgroups of a fixed size begin with the first value. A stretch does not know how many values
// came before it: it keeps the subgroups of every phase (beginning with its first, second, ...
// value) until it does. Subgroups by label are consecutive values of the same label.
#pragma once

#include <boost/container/static_vector.hpp>
#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "capsigh/quality/control_limits.hpp"
#include "capsigh/quality/moments.hpp"
#include "capsigh/quality/runs.hpp"

namespace capsigh {

inline constexpr std::size_t kWindow = 8192;  ///< values (or subgroups by label) tested at the end

/// How a stream is charted; the same for every part of it.
struct ChartPlan {
  std::size_t subgroup = 1;  ///< values a subgroup, up to kLargestTabled; 1: individuals
  bool by_label = false;     ///< subgroups are consecutive values of one label
  std::optional<Established> established;
  ControlConstants table;
  RunsRules rules;
};

/// One value of the stream.
struct Sample {
  double value = 0;
  std::uint64_t row = 0;  ///< from 1
  std::optional<double> time;
};

/// The last kWindow of something, in order.
template <class T>
class Window {
 public:
  void add(const T& item) {
    if (items_.size() < kWindow) {
      items_.push_back(item);
    } else {
      items_[start_] = item;
      start_ = (start_ + 1) % kWindow;
    }
  }
  void append(const Window& later) {
    for (std::size_t i = 0; i < later.size(); ++i) add(later[i]);
  }
  void shift_rows(std::uint64_t rows) {
    for (auto& item : items_) item.row += rows;
  }
  [[nodiscard]] std::size_t size() const { return items_.size(); }
  [[nodiscard]] const T& operator[](std::size_t i) const {
    return items_[(start_ + i) % items_.size()];
  }

 private:
  std::vector<T> items_;
  std::size_t start_ = 0;
};

/// One point of a location chart with both measures of its spread.
struct Subgroup {
  double mean = 0;
  double range = 0;
  double deviation = 0;
  std::size_t size = 0;
  std::uint64_t row = 0;  ///< of its last value
  std::optional<double> time;
};

/// Signals of points against established limits.
struct TestedPoints {
  Runs runs;
  Signals ranges;      ///< beyond the limits of the moving range or range
  Signals deviations;  ///< beyond the limits of the standard deviation
};

/// The subgroups of one phase.
struct PhaseState {
  std::uint64_t subgroups = 0;
  ExactSum means;
  ExactSum ranges;
  ExactSum deviations;
  TestedPoints tested;  ///< where limits are established
};

/// Individuals (subgroup 1) and subgroups of a fixed size.
struct RowCharts {
  std::uint64_t count = 0;
  ExactSum moving_ranges;  ///< count − 1 of them; individuals only
  boost::container::static_vector<Sample, kLargestTabled> head;    ///< the first subgroup − 1
  boost::container::static_vector<Sample, kLargestTabled> recent;  ///< the last, in a ring
  std::vector<PhaseState> phases;  ///< phase p: subgroups ending at counts ≡ p
  Window<Sample> window;           ///< where limits come from the data

  void add(const Sample& sample, const ChartPlan& plan);
  void shift_rows(std::uint64_t rows);
  void append(const RowCharts& later, const ChartPlan& plan);

 private:
  void add_subgroup(std::size_t phase, const Subgroup& subgroup, const ChartPlan& plan);
  void add_moving_range(const Sample& from, const Sample& to, const ChartPlan& plan);
  [[nodiscard]] const Sample& back(std::size_t age) const;
};

/// A subgroup by label while it is open.
struct LabelGroup {
  std::string label;
  Moments moments;
  std::uint64_t row = 0;
  std::optional<double> time;
};

/// Spread of all closed subgroups of one size.
struct SizeSums {
  std::uint64_t subgroups = 0;
  ExactSum ranges;
  ExactSum deviations;  ///< above kLargestTabled values already divided by c4
};

/// Subgroups by label. The first and the last are open: what lies beside may belong to them.
struct LabelCharts {
  std::optional<LabelGroup> first;
  std::optional<LabelGroup> last;                      ///< where there is more than one
  std::array<SizeSums, kLargestTabled + 2> by_size{};  ///< [kLargestTabled + 1]: larger ones
  std::uint64_t closed = 0;                            ///< between first and last
  TestedPoints tested;
  Window<Subgroup> window;

  void add(std::string_view label, const Sample& sample, const ChartPlan& plan);
  void shift_rows(std::uint64_t rows);
  void append(const LabelCharts& later, const ChartPlan& plan);
  /// Takes a subgroup into the sums.
  void close(const LabelGroup& group, const ChartPlan& plan);
};

/// A pair of charts as found.
struct ChartFigures {
  ChartKind kind = ChartKind::individuals;
  std::size_t size = 0;  ///< values a subgroup; 0: varying, limits are those of the largest share
  std::uint64_t points = 0;
  std::uint64_t tested = 0;  ///< of them, the last
  ChartLimits limits;
  bool established = false;
  std::array<Signals, kRunsTests> signals;  ///< of the location chart
  Signals spread_signals;                   ///< beyond the limits of the spread chart
};

/// Charts from the state of a whole stream; `mean` is that of all its values. Empty below two
/// points.
std::vector<ChartFigures> charts(const RowCharts& rows, const ChartPlan& plan);
std::vector<ChartFigures> charts(const LabelCharts& labels, const ChartPlan& plan, double mean);

}  // namespace capsigh
