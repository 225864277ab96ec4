// Summaries as JSON and back, and as text.
#include <catch2/catch.hpp>
#include <random>

#include "capsigh/render/summary.hpp"
#include "plan.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

SummaryPlan plan_for(std::size_t subgroup, bool established) {
  SummaryPlan plan;
  plan.title = "Lemon soda";
  plan.quantity = "CO2";
  plan.unit = "vol";
  plan.wish = "3.70 vol ± 0.10 vol";
  plan.limits = {3.6, 3.8};
  plan.group_by = {"line", "valve"};
  plan.preliminary = 25;
  plan.chart = chart_plan(subgroup == 0 ? 1 : subgroup);
  plan.chart.by_label = subgroup == 0;
  if (subgroup == 0) plan.label_column = "sample";
  if (established) plan.chart.established = Established{3.7, 0.02};
  return plan;
}

void feed(Summary& s, std::size_t from, std::size_t to, std::uint64_t seed = 11) {
  std::mt19937_64 random(seed);
  std::normal_distribution<double> noise(0, 0.02);
  for (std::size_t i = 0; i < to; ++i) {
    const double value = 3.7 + noise(random) + (i > 100 ? 0.0002 * static_cast<double>(i) : 0.0);
    if (i < from) continue;
    const std::string group = std::string("2") + kGroupSeparator + std::to_string(i % 4);
    const std::string label = std::to_string(i / 6);
    s.add({value, 1764547200.0 + 30.0 * static_cast<double>(i),
           value > 3.8 ? Verdict::outside : Verdict::inside, group, label});
  }
}

}  // namespace

TEST_CASE("a summary survives JSON to the last bit, and merges after it") {
  for (const bool established : {false, true}) {
    for (const std::size_t subgroup : {1U, 5U, 0U}) {
      INFO("subgroup " << subgroup << ", established " << established);
      Summary whole;
      whole.plan = plan_for(subgroup, established);
      feed(whole, 0, 300);
      Summary a;
      a.plan = whole.plan;
      feed(a, 0, 133);
      Summary b;
      b.plan = whole.plan;
      feed(b, 133, 300);
      const auto again = [&](const Summary& s) {
        const std::string text = json_summary(s);
        auto read = read_summary(text, "part.json");
        for (const auto& f : read.findings) UNSCOPED_INFO(f.message);
        REQUIRE(read);
        Summary summary = *read;
        summary.plan.chart.table = s.plan.chart.table;
        summary.plan.chart.rules = s.plan.chart.rules;
        summary.plan.preliminary = s.plan.preliminary;
        CHECK(json_summary(summary) == text);
        return summary;
      };
      Summary merged = again(a);
      merged.append(again(b));
      // Figures to nine digits, as programs get them, and every violation.
      const std::string expected = json_summary(whole);
      const std::string got = json_summary(merged);
      const auto figures_of = [](const std::string& text) {
        return text.substr(0, text.find("\"state\""));
      };
      CHECK(figures_of(got) == figures_of(expected));
      CHECK(text_summary(merged) == text_summary(whole));
    }
  }
}

TEST_CASE("what is no summary is refused, whatever it is") {
  Summary s;
  s.plan = plan_for(5, false);
  feed(s, 0, 60);
  const std::string good = json_summary(s);
  for (const std::string& bad :
       {std::string(), std::string("[]"), std::string("{}"), std::string("\xff\xfe"),
        good.substr(0, good.size() / 2), std::string("{\"kind\": \"capsigh summary\"}")}) {
    const auto read = read_summary(bad, "x.json");
    CHECK_FALSE(read);
    REQUIRE(read.findings.size() == 1);
    CHECK(read.findings[0].code == "not-a-summary");
  }
  // One byte changed anywhere: read or refused, never a crash, and still able to be merged.
  std::mt19937_64 random(3);
  std::uniform_int_distribution<std::size_t> at(0, good.size() - 1);
  for (int i = 0; i < 400; ++i) {
    std::string changed = good;
    changed[at(random)] = "0123456789{}[],\"-n"[at(random) % 18];
    auto read = read_summary(changed, "x.json");
    if (!read) continue;
    Summary other = *read;
    if (!mismatch(other.plan, s.plan).empty()) continue;
    other.plan.chart.table = s.plan.chart.table;
    other.plan.chart.rules = s.plan.chart.rules;
    other.append(s);
    CHECK(other.rows >= s.rows);
  }
}

TEST_CASE("a text summary names what a shift leader needs") {
  Summary s;
  s.plan = plan_for(1, true);
  feed(s, 0, 300);
  s.reject();
  const std::string text = text_summary(s);
  for (const std::string word :
       {"301, 1 of them rejected", "300 inside", "Cpk", "per hour", "limits established",
        "a run on one side", "2025-12-01", "line 2, valve 3", "By line, valve"}) {
    INFO(word << "\n" << text);
    const bool found = text.find(word) != std::string::npos;
    const bool rephrased = word == "limits established" &&
                           text.find("established; 300 points tested") != std::string::npos;
    CHECK((found || rephrased));
  }
  std::size_t longest = 0;
  std::size_t begin = 0;
  for (std::size_t end = text.find('\n'); end != std::string::npos; end = text.find('\n', begin)) {
    // Columns, not bytes: ± takes two bytes.
    const auto line = text.substr(begin, end - begin);
    std::size_t columns = 0;
    for (const char c : line) columns += (static_cast<unsigned char>(c) & 0xC0U) != 0x80U ? 1 : 0;
    longest = std::max(longest, columns);
    begin = end + 1;
  }
  CHECK(longest <= 80);
}
