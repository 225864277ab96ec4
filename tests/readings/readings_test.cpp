// The parts of the readings pipeline: CSV, columns, times, numbers.
#include <fmt/format.h>

#include <catch2/catch.hpp>
#include <cmath>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <random>
#include <sstream>

#include "capsigh/readings/columns.hpp"
#include "capsigh/readings/fixed.hpp"
#include "plans.hpp"
#include "support.hpp"

using namespace capsigh;

namespace {

// A directory of its own that goes with the test.
class Scratch {
 public:
  Scratch() : path_(std::filesystem::temp_directory_path() / "capsigh-readings-XXXXXX") {
    std::string name = path_.string();
    REQUIRE(::mkdtemp(name.data()) != nullptr);
    path_ = name;
  }
  ~Scratch() { std::filesystem::remove_all(path_); }
  Scratch(const Scratch&) = delete;
  Scratch& operator=(const Scratch&) = delete;

  [[nodiscard]] std::string file(const std::string& name) const { return (path_ / name).string(); }
  [[nodiscard]] std::string write(const std::string& name, const std::string& text) const {
    std::ofstream(path_ / name, std::ios::binary) << text;
    return file(name);
  }
  [[nodiscard]] std::string read(const std::string& name) const {
    std::ifstream in(path_ / name, std::ios::binary);
    std::stringstream text;
    text << in.rdbuf();
    return text.str();
  }

 private:
  std::filesystem::path path_;
};

struct Judged {
  ReadingsRun run;
  std::string out;
  std::string rejects;
};

Judged judged(const std::string& text, unsigned threads = 1,
              const std::string& recipe = test::kSparklingWater) {
  const Scratch scratch;
  ReadingsRequest request;
  request.input = scratch.write("in.csv", text);
  request.out = scratch.file("out.csv");
  request.rejects = scratch.file("rejects.csv");
  request.threads = threads;
  Judged all;
  all.run = judge_readings(request, test::reading_plan(recipe), {});
  all.out = scratch.read("out.csv");
  all.rejects = scratch.read("rejects.csv");
  return all;
}

std::vector<std::string> lines(const std::string& text) {
  std::vector<std::string> all;
  std::istringstream in(text);
  for (std::string line; std::getline(in, line);) all.push_back(line);
  return all;
}

std::string code_of(const Judged& j) {
  return has_error(j.run.findings) ? j.run.findings.front().code : "";
}

double seconds(const std::string& text, DateOrder order = DateOrder::unknown) {
  const auto read = read_time(text, order);
  INFO(text);
  REQUIRE(read.fault == TimeFault::none);
  return read.time.seconds;
}

TimeFault fault(const std::string& text) { return read_time(text, DateOrder::unknown).fault; }

}  // namespace

TEST_CASE("readings: fixed-point numbers are those of fmt", "[readings]") {
  std::mt19937_64 random(1);
  std::uniform_real_distribution<double> exponent(-6, 11);
  std::uniform_int_distribution<int> whole(-2'000'000, 2'000'000);
  for (int decimals = 0; decimals <= 9; ++decimals) {
    const FixedPoint fixed(decimals);
    const double ten = std::pow(10.0, decimals);
    for (int i = 0; i < 20000; ++i) {
      // Every other one is a tie in decimal, or within an ulp of one.
      double value = std::pow(10.0, exponent(random)) * (i % 4 == 0 ? -1 : 1);
      if (i % 2 == 0) value = (whole(random) + 0.5) / ten;
      if (i % 8 == 2) value = std::nextafter(value, 0.0);
      char text[FixedPoint::kMost];
      const std::string got(text, fixed.write(text, value));
      std::string expected = fmt::format("{:.{}f}", value, decimals);
      if (expected.find_first_not_of("-0.") == std::string::npos && expected[0] == '-') {
        expected.erase(0, 1);
      }
      if (got != expected) {
        INFO(fmt::format("{:.17g} with {} decimals", value, decimals));
        REQUIRE(got == expected);
      }
    }
  }
  char text[FixedPoint::kMost];
  const FixedPoint comma(2, ',');
  CHECK(std::string(text, comma.write(text, -3.456)) == "-3,46");
  CHECK(std::string(text, comma.write(text, 1e300)).size() == 304);
}

TEST_CASE("readings: times as people write them", "[readings]") {
  // 2026-03-01 06:30:00 UTC is 1772346600 s (date -u -d @1772346600).
  const double t = 1772346600;
  for (const auto* text :
       {"2026-03-01T06:30:00", "2026-03-01 06:30", "2026-03-01T06:30:00Z", "20260301T063000Z",
        "2026-03-01T07:30:00+01:00", "2026-03-01T07:30+01", "2026-02-28T22:30:00-08:00",
        "1.3.2026 06:30", "01.03.2026 06:30:00", "1 Mar 2026 6:30 am", "01-Mar-2026 06:30",
        "Mar 1, 2026 06:30", "1 March 2026 06:30", "2026/03/01 06:30"}) {
    CHECK(seconds(text) == t);
  }
  CHECK(seconds("2026-03-01T06:30:00.250") == t + 0.25);
  CHECK(seconds("1 Mar 2026 12:30 am") == t - 6 * 3600);
  CHECK(seconds("1 Mar 2026 12:30 PM") == t + 6 * 3600);
  CHECK(seconds("2026-03-01") == t - 6.5 * 3600);
  CHECK(seconds("13/03/2026 06:30") == t + 12 * 86400);
  CHECK(seconds("03/13/2026 06:30") == t + 12 * 86400);
  CHECK(seconds("01/03/2026 06:30", DateOrder::day_first) == t);
  CHECK(seconds("03/01/2026 06:30", DateOrder::month_first) == t);
  CHECK(fault("01/03/2026 06:30") == TimeFault::ambiguous);
  CHECK(fault("13/13/2026") == TimeFault::impossible);
  CHECK(fault("2026-02-30") == TimeFault::impossible);
  CHECK(fault("2026-03-01 25:00") == TimeFault::impossible);
  for (const auto* text : {"", "noon", "1/3/26", "2026-3", "06:30", "2026-03-01 06", "1.3.26",
                           "2026-03-01T06:30:00+", "2026-03-01 06:30 xm", "99999-01-01"}) {
    INFO(text);
    CHECK(fault(text) == TimeFault::unreadable);
  }
}

TEST_CASE("readings: rows keep their columns and get content, U, verdict and probability",
          "[readings]") {
  const auto j = judged(
      "id,temperature [degC],pressure [bar gauge],note\n"
      "a,4.0,1.62,\"well, fine\"\n"
      "b,39.2,1.62,out of the fridge\n");
  const auto out = lines(j.out);
  REQUIRE(out.size() == 3);
  CHECK(out[0] ==
        "id,temperature [degC],pressure [bar gauge],note,content [vol],U [vol],verdict,"
        "probability,decided by");
  CHECK(out[1].starts_with("a,4.0,1.62,\"well, fine\",3."));
  CHECK(out[1].find(",inside,0.9") != std::string::npos);
  CHECK(out[2].find(",outside,0.0000,") != std::string::npos);
  CHECK(j.run.summary.rows == 2);
  CHECK(j.run.summary.rejected == 0);
}

TEST_CASE("readings: units by header, by bracket and by the recipe", "[readings]") {
  const auto value = [](const std::string& text) {
    const auto row = lines(judged(text).out).at(1);
    const auto fields = split_record(row, ',');
    return std::stod(fields.at(2));
  };
  const double metric = value("temperature [degC],pressure [bar gauge]\n4,1.62\n");
  // 1.62 bar = 23.4961141 psi = 162 kPa.
  CHECK(value("Temperature (degF),Pressure (psig)\n39.2,23.4961141\n") == metric);
  CHECK(value("TEMPERATURE [K],pressure [kPa gauge]\n277.15,162\n") == metric);
  const double absolute = value("temperature [degC],pressure [bar abs]\n4,2.591879\n");
  CHECK(std::abs(absolute - metric) < 2e-3);  // ambient at 350 m is 971.9 hPa
}

TEST_CASE("readings: what is wrong with a header is said", "[readings]") {
  CHECK(code_of(judged("")) == "no-readings");
  CHECK(code_of(judged("4.1,2.3\n4.2,2.3\n")) == "no-header");
  CHECK(code_of(judged("temperature [degC],temperature [degC]\n1,2\n")) == "column-twice");
  CHECK(code_of(judged("temperature [degC],Temperature [degF],pressure [psig]\n1,2,3\n")) ==
        "column-twice");
  CHECK(code_of(judged("temperature [bar],pressure [bar gauge]\n1,2\n")) == "column-unit");
  CHECK(code_of(judged("temperature,pressure [bar gauge]\n1,2\n")) == "column-unit");
  CHECK(code_of(judged("temperature [degC],pressure [bar]\n1,2\n")) == "column-unit");
  CHECK(code_of(judged("temperature [degC],p\n1,2\n")) == "column-missing");
  CHECK(code_of(judged("time,temperature [degC],pressure [psig]\n03/04/2026,1,2\n")) ==
        "time-ambiguous");
  CHECK(code_of(judged("temperature [degC],pressure [psig],air [mL]\n1,2,1\n")) ==
        "air-without-container");
}

TEST_CASE("readings: bad rows are rejected with line and reason, never judged", "[readings]") {
  const auto j = judged(
      "temperature [degC],pressure [bar gauge]\n"
      "4.0,1.62\n"
      "4.0\n"
      "x,1.62\n"
      "4.0,1.62,9\n"
      "\n"
      "4.0,nan\n"
      ",1.62\n"
      "4.0,99\n"
      "900,1\n"
      "\"4.0\",\"1.62\"\n"
      "4.0,-0.99\n"
      "\"4.0,1.62\n");
  CHECK(j.run.summary.rows == 11);
  CHECK(j.run.summary.rejected == 9);
  CHECK(lines(j.out).size() == 3);
  const auto rejects = lines(j.rejects);
  REQUIRE(rejects.size() == 10);
  CHECK(rejects[0] == "line,reason,temperature [degC],pressure [bar gauge]");
  CHECK(rejects[1] == "3,1 field where the header names 2,4.0");
  CHECK(rejects[2] == "4,'x' in 'temperature [degC]' is no number,x,1.62");
  CHECK(rejects[3] == "5,3 fields where the header names 2,4.0,1.62,9");
  CHECK(rejects[4] == "7,'nan' in 'pressure [bar gauge]' is no number,4.0,nan");
  CHECK(rejects[5] == "8,'temperature [degC]' is empty,,1.62");
  CHECK(rejects[6].starts_with("9,"));
  CHECK(rejects[7].starts_with("10,"));
  CHECK(rejects[8].starts_with("12,"));
  CHECK(rejects[9].starts_with("13,a quote opens a field and is not closed,"));
}

TEST_CASE("readings: semicolons bring decimal commas, CRLF stays", "[readings]") {
  const auto j = judged(
      "\xEF\xBB\xBFid;temperature [degC];pressure [bar gauge]\r\n1;4,0;1,62\r\n2;4.0;1.62\r\n");
  const auto out = lines(j.out);
  REQUIRE(out.size() == 3);
  CHECK(out[1].starts_with("1;4,0;1,62;3,"));
  CHECK(out[1].ends_with(";\r"));
  CHECK(out[1].substr(11) == out[2].substr(11));
  CHECK(j.run.summary.rejected == 0);
}

TEST_CASE("readings: the same bytes for any number of threads and any chunking", "[readings]") {
  std::mt19937 random(3);
  std::uniform_real_distribution<double> t(-5, 30);
  std::uniform_real_distribution<double> p(0, 4);
  std::string text = "id,temperature [degC],pressure [bar gauge],valve\n";
  for (int i = 0; i < 60000; ++i) {
    text += fmt::format("{},{:.2f},{:.3f},{}\n", i, t(random), p(random), i % 4);
    if (i % 997 == 0) text += "broken\n";
    if (i % 1499 == 0) text += fmt::format("\"a \"\"quoted\"\"\nid\",{:.2f},1.5,2\n", t(random));
  }
  const auto one = judged(text, 1);
  CHECK(one.run.summary.rows > 60000);
  for (const unsigned threads : {2U, 3U, 7U}) {
    const auto many = judged(text, threads);
    CHECK(many.out == one.out);
    CHECK(many.rejects == one.rejects);
    CHECK(many.run.summary.overall.moments.sum.value() ==
          one.run.summary.overall.moments.sum.value());
  }
  // One row by itself comes out as it does among others.
  const auto rows = lines(one.out);
  for (const std::size_t i : {std::size_t{1}, std::size_t{5000}, rows.size() - 1}) {
    const auto row = rows[i].substr(0, rows[i].find(','));
    INFO(row);
    const std::size_t at = text.find("\n" + row + ",");
    const auto line = text.substr(at + 1, text.find('\n', at + 1) - at);
    const auto alone = judged("id,temperature [degC],pressure [bar gauge],valve\n" + line);
    CHECK(lines(alone.out).at(1) == rows[i]);
  }
}
