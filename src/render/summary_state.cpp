#include "summary_state.hpp"

#include <cmath>

#include "capsigh/render/summary.hpp"

namespace capsigh {
namespace {

using Json = nlohmann::ordered_json;

// ---- out: numbers in full, so that what is read back is what was written.

Json put(const ExactSum& s) { return Json::array({s.high(), s.low()}); }

Json put(const std::optional<double>& v) { return v ? Json(*v) : Json(nullptr); }

Json put(const Sample& s) { return Json::array({s.value, s.row, put(s.time)}); }

Json put(const Subgroup& s) {
  return Json::array({s.mean, s.range, s.deviation, s.size, s.row, put(s.time)});
}

Json put(const ChartPoint& p) { return Json::array({p.value, p.z, p.row, put(p.time)}); }

Json put(const Violation& v) { return Json::array({v.row, put(v.time), v.value}); }

Json put(const Signals& s);
Json put(const PhaseState& p);
Json put(const SizeSums& s);

template <class Items>
Json put_all(const Items& items) {
  Json list = Json::array();
  for (std::size_t i = 0; i < items.size(); ++i) list.push_back(put(items[i]));
  return list;
}

Json put(const Signals& s) { return {{"count", s.count}, {"first", put_all(s.first)}}; }

Json put(const Moments& m) {
  Json j{{"count", m.count}, {"sum", put(m.sum)}, {"squares", put(m.squares)}};
  if (m.count > 0) j["extremes"] = Json::array({m.least, m.greatest});
  return j;
}

Json put(const TimeSums& t) {
  Json j{{"count", t.count}};
  if (t.count == 0) return j;
  j["sums"] = Json::array({put(t.t), put(t.tt), put(t.x), put(t.xx), put(t.tx)});
  j["ends"] = Json::array({t.first, t.last});
  return j;
}

Json put(const Runs& r) {
  const auto& s = r.state;
  return {{"count", r.count},
          {"state", Json::array({put(s.last), s.direction, s.side, s.trend, s.alternating, s.within,
                                 s.outside, s.above_two, s.below_two, s.above_one, s.below_one})},
          {"head", put_all(r.head)},
          {"signals", put_all(r.signals)}};
}

Json put(const TestedPoints& t) {
  if (t.runs.count == 0 && t.ranges.count == 0 && t.deviations.count == 0) return nullptr;
  return {{"runs", put(t.runs)}, {"ranges", put(t.ranges)}, {"deviations", put(t.deviations)}};
}

Json put(const PhaseState& p) {
  return {{"subgroups", p.subgroups},
          {"means", put(p.means)},
          {"ranges", put(p.ranges)},
          {"deviations", put(p.deviations)},
          {"tested", put(p.tested)}};
}

Json put(const RowCharts& r) {
  return {{"count", r.count},
          {"moving_ranges", put(r.moving_ranges)},
          {"head", put_all(r.head)},
          {"recent", put_all(r.recent)},
          {"phases", put_all(r.phases)},
          {"window", put_all(r.window)}};
}

Json put(const std::optional<LabelGroup>& g) {
  if (!g) return nullptr;
  return {
      {"label", g->label}, {"moments", put(g->moments)}, {"row", g->row}, {"time", put(g->time)}};
}

Json put(const SizeSums& s) { return Json::array({s.subgroups, put(s.ranges), put(s.deviations)}); }

Json put(const LabelCharts& l) {
  return {{"first", put(l.first)}, {"last", put(l.last)},     {"by_size", put_all(l.by_size)},
          {"closed", l.closed},    {"tested", put(l.tested)}, {"window", put_all(l.window)}};
}

Json put(const StreamState& s, const ChartPlan& plan) {
  Json j{{"verdicts", Json::array({s.verdicts.inside, s.verdicts.outside, s.verdicts.undecided})},
         {"moments", put(s.moments)},
         {"times", put(s.times)}};
  if (plan.by_label) {
    j["labels"] = put(s.labels);
  } else {
    j["rows"] = put(s.rows);
  }
  return j;
}

// ---- in: a file of anybody's. Whatever is missing or of another kind throws a json exception,
// what is out of bounds this one.

struct NotASummary {};

void require(bool holds) {
  if (!holds) throw NotASummary{};
}

double number(const Json& j) {
  const auto value = j.get<double>();
  require(std::isfinite(value));
  return value;
}

std::uint64_t natural(const Json& j) {
  require(j.is_number_unsigned());
  return j.get<std::uint64_t>();
}

int small(const Json& j) {
  constexpr std::int64_t most = 255;
  require(j.is_number_integer() && std::abs(j.get<std::int64_t>()) <= most);
  return j.get<int>();
}

std::optional<double> maybe(const Json& j) {
  if (j.is_null()) return std::nullopt;
  return number(j);
}

void get(const Json& j, ExactSum& s) { s = {number(j.at(0)), number(j.at(1))}; }
void get(const Json& j, Sample& s) { s = {number(j.at(0)), natural(j.at(1)), maybe(j.at(2))}; }
void get(const Json& j, Subgroup& s) {
  s = {number(j.at(0)),  number(j.at(1)),  number(j.at(2)),
       natural(j.at(3)), natural(j.at(4)), maybe(j.at(5))};
  require(s.size > 0);
}
void get(const Json& j, ChartPoint& p) {
  p = {number(j.at(0)), number(j.at(1)), natural(j.at(2)), maybe(j.at(3))};
}
void get(const Json& j, Violation& v) { v = {natural(j.at(0)), maybe(j.at(1)), number(j.at(2))}; }

void get(const Json& j, PhaseState& p);

template <class List>
void get_list(const Json& j, List& list, std::size_t most) {
  require(j.is_array() && j.size() <= most);
  for (const auto& item : j) get(item, list.emplace_back());
}

template <class T>
void get_window(const Json& j, Window<T>& window) {
  require(j.is_array() && j.size() <= kWindow);
  for (const auto& item : j) {
    T one;
    get(item, one);
    window.add(one);
  }
}

void get(const Json& j, Signals& s) {
  s.count = natural(j.at("count"));
  get_list(j.at("first"), s.first, kListed);
  require(s.first.size() <= s.count);
}

void get(const Json& j, Moments& m) {
  m.count = natural(j.at("count"));
  get(j.at("sum"), m.sum);
  get(j.at("squares"), m.squares);
  if (m.count == 0) return;
  m.least = number(j.at("extremes").at(0));
  m.greatest = number(j.at("extremes").at(1));
}

void get(const Json& j, TimeSums& t) {
  t.count = natural(j.at("count"));
  if (t.count == 0) return;
  const Json& sums = j.at("sums");
  get(sums.at(0), t.t);
  get(sums.at(1), t.tt);
  get(sums.at(2), t.x);
  get(sums.at(3), t.xx);
  get(sums.at(4), t.tx);
  t.first = number(j.at("ends").at(0));
  t.last = number(j.at("ends").at(1));
}

void get(const Json& j, Runs& r) {
  r.count = natural(j.at("count"));
  const Json& s = j.at("state");
  r.state.last = maybe(s.at(0));
  r.state.direction = small(s.at(1));
  r.state.side = small(s.at(2));
  r.state.trend = small(s.at(3));
  r.state.alternating = small(s.at(4));
  r.state.within = small(s.at(5));
  r.state.outside = small(s.at(6));
  r.state.above_two = static_cast<std::uint8_t>(small(s.at(7)));
  r.state.below_two = static_cast<std::uint8_t>(small(s.at(8)));
  r.state.above_one = static_cast<std::uint8_t>(small(s.at(9)));
  r.state.below_one = static_cast<std::uint8_t>(small(s.at(10)));
  get_list(j.at("head"), r.head, kLookback);
  require(r.head.size() == std::min<std::uint64_t>(r.count, kLookback));
  const Json& signals = j.at("signals");
  require(signals.is_array() && signals.size() == r.signals.size());
  for (std::size_t i = 0; i < r.signals.size(); ++i) get(signals[i], r.signals[i]);
}

void get(const Json& j, TestedPoints& t) {
  if (j.is_null()) return;
  get(j.at("runs"), t.runs);
  get(j.at("ranges"), t.ranges);
  get(j.at("deviations"), t.deviations);
}

void get(const Json& j, PhaseState& p) {
  p.subgroups = natural(j.at("subgroups"));
  get(j.at("means"), p.means);
  get(j.at("ranges"), p.ranges);
  get(j.at("deviations"), p.deviations);
  get(j.at("tested"), p.tested);
}

void get(const Json& j, RowCharts& r, const ChartPlan& plan) {
  const std::size_t m = plan.subgroup;
  r.count = natural(j.at("count"));
  get(j.at("moving_ranges"), r.moving_ranges);
  get_list(j.at("head"), r.head, kLargestTabled);
  get_list(j.at("recent"), r.recent, kLargestTabled);
  get_list(j.at("phases"), r.phases, m);
  get_window(j.at("window"), r.window);
  if (r.count == 0) return;
  // What adding values would have left, and what appending relies on.
  require(r.phases.size() == m);
  require(r.recent.size() == std::min<std::uint64_t>(r.count, m));
  require(r.head.size() == std::min<std::uint64_t>(r.count, std::max<std::size_t>(m - 1, 1)));
  require(plan.established || r.window.size() == std::min<std::uint64_t>(r.count, kWindow));
}

void get(const Json& j, std::optional<LabelGroup>& g) {
  if (j.is_null()) return;
  g.emplace();
  g->label = j.at("label").get<std::string>();
  get(j.at("moments"), g->moments);
  require(g->moments.count > 0);
  g->row = natural(j.at("row"));
  g->time = maybe(j.at("time"));
}

void get(const Json& j, SizeSums& s) {
  s.subgroups = natural(j.at(0));
  get(j.at(1), s.ranges);
  get(j.at(2), s.deviations);
}

void get(const Json& j, LabelCharts& l) {
  get(j.at("first"), l.first);
  get(j.at("last"), l.last);
  require(l.first || !l.last);
  const Json& sizes = j.at("by_size");
  require(sizes.is_array() && sizes.size() == l.by_size.size());
  for (std::size_t i = 0; i < l.by_size.size(); ++i) get(sizes[i], l.by_size[i]);
  l.closed = natural(j.at("closed"));
  get(j.at("tested"), l.tested);
  get_window(j.at("window"), l.window);
}

void get(const Json& j, StreamState& s, const ChartPlan& plan) {
  s.verdicts = {natural(j.at("verdicts").at(0)), natural(j.at("verdicts").at(1)),
                natural(j.at("verdicts").at(2))};
  get(j.at("moments"), s.moments);
  get(j.at("times"), s.times);
  if (plan.by_label) {
    get(j.at("labels"), s.labels);
  } else {
    get(j.at("rows"), s.rows, plan);
  }
}

SummaryPlan plan_of(const Json& root) {
  const Json& j = root.at("state").at("plan");
  SummaryPlan plan;
  plan.title = root.at("title").get<std::string>();
  plan.quantity = root.at("quantity").get<std::string>();
  plan.unit = root.at("unit").get<std::string>();
  if (root.contains("target")) plan.wish = root.at("target").get<std::string>();
  plan.recipe_digest = root.at("recipe_digest").get<std::string>();
  plan.constants_digest = root.at("constants_digest").get<std::string>();
  if (const auto low = maybe(j.at("limits").at(0))) plan.limits.low = *low;
  if (const auto high = maybe(j.at("limits").at(1))) plan.limits.high = *high;
  plan.group_by = j.at("group_by").get<std::vector<std::string>>();
  plan.label_column = j.at("label_column").get<std::string>();
  plan.chart.by_label = j.at("by_label").get<bool>();
  plan.chart.subgroup = natural(j.at("subgroup"));
  require(plan.chart.subgroup >= 1 && plan.chart.subgroup <= kLargestTabled);
  const Json& established = j.at("established");
  if (!established.is_null()) {
    plan.chart.established = Established{number(established.at(0)), number(established.at(1))};
    require(plan.chart.established->sigma > 0);
  }
  return plan;
}

Summary summary_of(const Json& root) {
  require(root.at("kind") == "capsigh summary");
  Summary s;
  s.plan = plan_of(root);
  s.rows = natural(root.at("rows"));
  s.rejected = natural(root.at("rejected"));
  const Json& state = root.at("state");
  get(state.at("overall"), s.overall, s.plan.chart);
  const Json& groups = state.at("groups");
  require(groups.is_array() && groups.size() <= kMaxGroups);
  for (const auto& g : groups) {
    get(g.at("of"), s.groups[g.at("group").get<std::string>()], s.plan.chart);
  }
  return s;
}

}  // namespace

nlohmann::ordered_json render_detail::state_json(const Summary& summary) {
  const auto& plan = summary.plan;
  const auto end = [](double x) { return std::isfinite(x) ? Json(x) : Json(nullptr); };
  const auto& known = plan.chart.established;
  Json j;
  j["plan"] = {{"limits", Json::array({end(plan.limits.low), end(plan.limits.high)})},
               {"group_by", plan.group_by},
               {"label_column", plan.label_column},
               {"by_label", plan.chart.by_label},
               {"subgroup", plan.chart.subgroup},
               {"established", known ? Json::array({known->centre, known->sigma}) : Json(nullptr)}};
  j["overall"] = put(summary.overall, plan.chart);
  j["groups"] = Json::array();
  for (const auto& [group, state] : summary.groups) {
    j["groups"].push_back({{"group", group}, {"of", put(state, plan.chart)}});
  }
  return j;
}

Outcome<Summary> read_summary(const std::string& text, const std::string& file) {
  try {
    return {summary_of(Json::parse(text)), {}};
  } catch (const Json::exception&) {
  } catch (const NotASummary&) {
  }
  Finding f;
  f.code = "not-a-summary";
  f.message = "this is no summary of readings";
  f.expected = "a file written by readings --summary NAME.json or by merge --as json";
  f.example = "capsigh readings shift.csv --for soda.toml --summary shift.json";
  f.place = Place{file, 0, 0, 1, ""};
  return {{}, {f}};
}

}  // namespace capsigh
