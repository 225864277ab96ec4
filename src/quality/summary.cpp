#include "capsigh/quality/summary.hpp"

namespace capsigh {
namespace {

constexpr double kHour = 3600;  // s

Drift per_hour(const Drift& d) {
  return {d.slope * kHour, d.u * kHour, d.low * kHour, d.high * kHour, d.at_end};
}

}  // namespace

void VerdictCounts::add(Verdict verdict) {
  switch (verdict) {
    case Verdict::inside: ++inside; break;
    case Verdict::outside: ++outside; break;
    case Verdict::undecided: ++undecided; break;
  }
}

void VerdictCounts::merge(const VerdictCounts& other) {
  inside += other.inside;
  outside += other.outside;
  undecided += other.undecided;
}

void StreamState::add(const Reading& reading, std::uint64_t row, const ChartPlan& plan) {
  if (reading.verdict) verdicts.add(*reading.verdict);
  moments.add(reading.value);
  if (reading.time) times.add(*reading.time, reading.value);
  const Sample sample{reading.value, row, reading.time};
  if (plan.by_label) {
    labels.add(reading.label, sample, plan);
  } else {
    rows.add(sample, plan);
  }
}

void StreamState::shift_rows(std::uint64_t by) {
  rows.shift_rows(by);
  labels.shift_rows(by);
}

void StreamState::append(const StreamState& later, const ChartPlan& plan) {
  verdicts.merge(later.verdicts);
  moments.merge(later.moments);
  times.merge(later.times);
  rows.append(later.rows, plan);
  labels.append(later.labels, plan);
}

void Summary::add(const Reading& reading) {
  ++rows;
  overall.add(reading, rows, plan.chart);
  if (plan.group_by.empty()) return;
  auto it = groups.find(reading.group);
  if (it == groups.end()) {
    if (groups.size() >= kMaxGroups) {
      too_many_groups = true;
      return;
    }
    it = groups.emplace(std::string(reading.group), StreamState{}).first;
  }
  it->second.add(reading, rows, plan.chart);
}

void Summary::append(Summary later) {
  later.overall.shift_rows(rows);
  overall.append(later.overall, plan.chart);
  for (auto& [group, stream] : later.groups) {
    stream.shift_rows(rows);
    groups[group].append(stream, plan.chart);
  }
  too_many_groups = too_many_groups || later.too_many_groups || groups.size() > kMaxGroups;
  rows += later.rows;
  rejected += later.rejected;
}

std::string mismatch(const SummaryPlan& a, const SummaryPlan& b) {
  if (a.recipe_digest != b.recipe_digest) return "they were judged by different recipes";
  if (a.constants_digest != b.constants_digest) return "they rest on different constants";
  if (a.quantity != b.quantity || a.unit != b.unit) return "they hold different quantities";
  if (a.group_by != b.group_by) return "they are grouped by different columns";
  const auto& x = a.chart;
  const auto& y = b.chart;
  const bool same = x.subgroup == y.subgroup && x.by_label == y.by_label &&
                    a.label_column == b.label_column &&
                    x.established.has_value() == y.established.has_value();
  return same ? "" : "they are charted by different subgroups";
}

StreamFigures figures(const StreamState& stream, const SummaryPlan& plan) {
  StreamFigures f;
  f.count = stream.moments.count;
  f.verdicts = stream.verdicts;
  f.mean = stream.moments.mean();
  f.deviation = stream.moments.deviation();
  if (f.count > 0) {
    f.least = stream.moments.least;
    f.greatest = stream.moments.greatest;
  }
  f.capability = capability(stream.moments, plan.limits);
  if (plan.chart.by_label) {
    f.charts = charts(stream.labels, plan.chart, f.mean.value_or(0.0));
  } else {
    f.charts = charts(stream.rows, plan.chart);
  }
  f.drift = stream.times.drift();
  if (f.drift) {
    if (const auto left = time_to_limit(*f.drift, plan.limits.low, plan.limits.high)) {
      f.hours_to_limit = *left / kHour;
    }
    f.drift = per_hour(*f.drift);
  }
  return f;
}

}  // namespace capsigh
