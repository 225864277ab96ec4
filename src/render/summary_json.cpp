#include <nlohmann/json.hpp>

#include "capsigh/quantity/grammar.hpp"
#include "capsigh/render/summary.hpp"
#include "summary_state.hpp"
#include "summary_words.hpp"

namespace capsigh {
namespace {

using Json = nlohmann::ordered_json;
using render_detail::time_text;

Json index(const Index& i) {
  return {{"value", for_machines(i.value)},
          {"low", doubt_for_machines(i.low)},
          {"high", doubt_for_machines(i.high)}};
}

Json limits(const ControlLimits& l) {
  return {{"low", for_machines(l.low)},
          {"centre", for_machines(l.centre)},
          {"high", for_machines(l.high)}};
}

Json violations(const Signals& signals) {
  Json list = Json::array();
  for (const auto& v : signals.first) {
    Json one{{"row", v.row}, {"value", for_machines(v.value)}};
    if (v.time) one["time"] = time_text(*v.time);
    list.push_back(std::move(one));
  }
  return {{"count", signals.count}, {"first", std::move(list)}};
}

std::string_view test_key(RunsTest test) {
  switch (test) {
    case RunsTest::beyond_limits: return "beyond_limits";
    case RunsTest::one_side: return "one_side";
    case RunsTest::trend: return "trend";
    case RunsTest::alternating: return "alternating";
    case RunsTest::two_of_three: return "two_of_three";
    case RunsTest::four_of_five: return "four_of_five";
    case RunsTest::within_one_sigma: return "within_one_sigma";
    case RunsTest::outside_one_sigma: return "outside_one_sigma";
  }
  return "";
}

Json chart(const ChartFigures& c) {
  static constexpr std::array<std::string_view, 3> kinds{"individuals", "mean_range",
                                                         "mean_deviation"};
  Json j{{"chart", kinds[static_cast<std::size_t>(c.kind)]}};
  if (c.size > 0) j["subgroup"] = c.size;
  j["points"] = c.points;
  j["tested"] = c.tested;
  j["limits_established"] = c.established;
  j["limits"] = limits(c.limits.location);
  j["spread_limits"] = limits(c.limits.spread);
  j["sigma"] = for_machines(c.limits.sigma);
  Json tests;
  for (std::size_t i = 0; i < kRunsTests; ++i) {
    tests[std::string(test_key(static_cast<RunsTest>(i)))] = violations(c.signals[i]);
  }
  j["violations"] = std::move(tests);
  j["spread_violations"] = violations(c.spread_signals);
  return j;
}

void put_stream(Json& j, const StreamFigures& f) {
  j["count"] = f.count;
  j["inside"] = f.verdicts.inside;
  j["outside"] = f.verdicts.outside;
  j["undecided"] = f.verdicts.undecided;
  if (f.mean) j["mean"] = for_machines(*f.mean);
  if (f.deviation) j["standard_deviation"] = for_machines(*f.deviation);
  if (f.least) j["least"] = for_machines(*f.least);
  if (f.greatest) j["greatest"] = for_machines(*f.greatest);
  if (f.capability) {
    if (f.capability->cp) j["cp"] = index(*f.capability->cp);
    j["cpk"] = index(f.capability->cpk);
  }
  if (f.drift) {
    j["drift_per_hour"] = {{"value", for_machines(f.drift->slope)},
                           {"u", doubt_for_machines(f.drift->u)},
                           {"low", doubt_for_machines(f.drift->low)},
                           {"high", doubt_for_machines(f.drift->high)}};
    if (f.hours_to_limit) j["hours_to_limit"] = doubt_for_machines(*f.hours_to_limit);
  }
  j["charts"] = Json::array();
  for (const auto& c : f.charts) j["charts"].push_back(chart(c));
}

Json group_names(const SummaryPlan& plan, std::string_view group) {
  Json names;
  for (const auto& name : plan.group_by) {
    const std::size_t end = group.find(kGroupSeparator);
    names[name] = group.substr(0, end);
    group = end == std::string_view::npos ? std::string_view{} : group.substr(end + 1);
  }
  return names;
}

}  // namespace

std::string json_summary(const Summary& summary) {
  const auto& plan = summary.plan;
  Json j{{"kind", "capsigh summary"}};
  j["title"] = plan.title;
  j["quantity"] = plan.quantity;
  j["unit"] = plan.unit;
  if (!plan.wish.empty()) j["target"] = plan.wish;
  j["rows"] = summary.rows;
  j["rejected"] = summary.rejected;
  put_stream(j["overall"], figures(summary.overall, plan));
  j["groups"] = Json::array();
  for (const auto& [group, state] : summary.groups) {
    Json g{{"group", group_names(plan, group)}};
    put_stream(g, figures(state, plan));
    j["groups"].push_back(std::move(g));
  }
  j["recipe_digest"] = plan.recipe_digest;
  j["constants_digest"] = plan.constants_digest;
  j["state"] = render_detail::state_json(summary);
  // Column names and labels come from files: a byte that is no text must not stop a summary.
  return j.dump(1, ' ', false, Json::error_handler_t::replace) + "\n";
}

}  // namespace capsigh
