#include <fmt/format.h>
#include <unistd.h>

#include <algorithm>
#include <cmath>
#include <condition_variable>
#include <deque>
#include <mutex>
#include <thread>
#include <utility>

#include "capsigh/answer/doubt.hpp"
#include "capsigh/answer/solve.hpp"
#include "capsigh/readings/readings.hpp"
#include "capsigh/readings/sink.hpp"
#include "rows.hpp"

namespace capsigh {
namespace {

using readings_detail::FileFormat;
using readings_detail::JudgedBlock;
using readings_detail::Reach;
using readings_detail::RowJudge;

// Blocks that are held back until a time can be read: rows without one are rejected anyway.
constexpr std::size_t kMostHeld = 64;

// Work in flight: a block is read, judged and delivered; each step in the order of the input.
class Pipeline {
 public:
  Pipeline(const ReadingPlan& plan, const FileFormat& format, CsvReader& reader, RowSink& out,
           RowSink& rejects, Summary& summary)
      : plan_(plan),
        format_(format),
        reader_(reader),
        out_(out),
        rejects_(rejects),
        summary_(summary) {}

  void run(unsigned threads, std::deque<CsvBlock> first) {
    first_ = std::move(first);
    if (threads <= 1) return work();
    std::vector<std::jthread> workers;
    for (unsigned i = 0; i < threads; ++i) workers.emplace_back([this] { work(); });
  }

  [[nodiscard]] const Findings& findings() const { return findings_; }
  [[nodiscard]] std::optional<std::uint64_t> stopped_at() const { return stopped_at_; }
  [[nodiscard]] const Reach& reach() const { return reach_; }

 private:
  void work() {
    RowJudge judge(plan_, format_);
    CsvBlock block;
    JudgedBlock judged;
    while (next(block)) {
      judge.judge(block, judged);
      deliver(block, judged);
    }
  }

  bool next(CsvBlock& block) {
    const std::lock_guard lock(reading_);
    if (ended_) return false;
    if (!first_.empty()) {
      block = std::move(first_.front());
      first_.pop_front();
      return true;
    }
    auto got = reader_.next(block);
    if (const auto* problem = std::get_if<Finding>(&got)) {
      const std::lock_guard also(delivering_);
      findings_.push_back(*problem);
      ended_ = true;
      return false;
    }
    if (!std::get<bool>(got)) ended_ = true;
    return !ended_;
  }

  void deliver(const CsvBlock& block, const JudgedBlock& judged) {
    std::unique_lock lock(delivering_);
    turn_.wait(lock, [&] { return turn_of_ == block.sequence; });
    if (!failed_) put(block, judged);
    ++turn_of_;
    turn_.notify_all();
    if (failed_) {
      lock.unlock();
      const std::lock_guard reading(reading_);
      ended_ = true;
    }
  }

  void put(const CsvBlock& block, const JudgedBlock& judged) {
    auto problem = out_.write(judged.out.view());
    if (!problem) problem = rejects_.write(judged.rejects);
    if (problem) {
      findings_.push_back(*problem);
      failed_ = true;
      return;
    }
    reach_.take(judged.reach);
    for (const auto& row : judged.rows) {
      if (row.rejected) {
        summary_.reject();
        if (!format_.stop_on_error) continue;
        stopped_at_ = block.first_line;
        failed_ = true;
        return;
      }
      const std::string_view keys = judged.keys;
      Reading reading;
      reading.value = row.value;
      if (row.timed) reading.time = row.time;
      if (row.judged) reading.verdict = row.verdict;
      reading.group = keys.substr(row.group, row.group_size);
      reading.label = keys.substr(row.group + row.group_size, row.label_size);
      summary_.add(reading);
    }
  }

  const ReadingPlan& plan_;
  const FileFormat& format_;
  CsvReader& reader_;
  RowSink& out_;
  RowSink& rejects_;
  Summary& summary_;
  std::mutex reading_;
  std::deque<CsvBlock> first_;  // read already
  bool ended_ = false;
  std::mutex delivering_;
  std::condition_variable turn_;
  std::uint64_t turn_of_ = 0;
  bool failed_ = false;
  Reach reach_;
  std::optional<std::uint64_t> stopped_at_;
  Findings findings_;
};

Finding at_line(const std::string& file, std::uint64_t line, std::string code,
                std::string message) {
  Finding f;
  f.code = std::move(code);
  f.message = std::move(message);
  f.place = Place{file, line, 1, 1, ""};
  return f;
}

// Dates with slashes, of which 05/05/2026 shows no order.
bool shows_nothing(std::string_view text, const ReadTime& read) {
  constexpr std::size_t latest = 2;  // where the first slash of such a date stands
  return read.order == DateOrder::unknown && text.find('/') <= latest;
}

// The first time of a file says whether times have zones and how dates are written; a date that
// could be read in two ways is refused. True once it is known.
std::variant<bool, Finding> settle_times(const CsvBlock& block, FileFormat& format) {
  if (block.fault) return false;
  const std::string_view bytes = block.bytes.view();
  std::size_t begin = 0;
  for (std::uint64_t line = block.first_line; begin < bytes.size(); ++line) {
    const std::size_t end = std::min(bytes.find('\n', begin), bytes.size());
    auto record = bytes.substr(begin, end - begin);
    if (record.ends_with('\r')) record.remove_suffix(1);
    begin = end + 1;
    const auto fields = split_record(record, format.dialect.delimiter);
    if (fields.size() != format.columns.count) continue;
    const auto& text = fields[*format.columns.time];
    const auto read = read_time(text, format.columns.dates);
    if (read.fault == TimeFault::ambiguous) {
      Finding f = at_line(format.file, line, "time-ambiguous",
                          fmt::format("'{}' is read in two ways: day or month first?", text));
      f.place->line_text = std::string(record);
      const auto& name = format.columns.names[*format.columns.time];
      f.expected = "the order, in the header or in [judging] columns; or dates by ISO 8601";
      f.example = fmt::format("columns = {{ \"{}\" = \"time [d/m/y]\" }}   # or [m/d/y]", name);
      return f;
    }
    if (read.fault != TimeFault::none) continue;
    format.zoned = read.time.zoned;
    if (format.columns.dates != DateOrder::unknown) return true;
    if (shows_nothing(text, read)) continue;
    format.columns.dates = read.order;
    return true;
  }
  return false;
}

// Decimals that show a hundredth of the smallest doubt, at least of a thousandth of the limits.
int decimals_for(const ReadingPlan& plan) {
  constexpr int least = 2;
  constexpr int most = 8;
  const double per_unit = 1.0 / plan.unit->factor;
  double scale = 1e-2;  // of a unit, where nothing is judged
  const Interval& limits = plan.limits;
  constexpr double fine = 1e-3;
  if (std::isfinite(limits.high)) scale = fine * limits.high * per_unit;
  if (std::isfinite(limits.low) && std::isfinite(limits.high)) {
    scale = fine * limits.width() * per_unit;
  }
  if (!(scale > 0)) return least + 2;
  return std::clamp(static_cast<int>(std::ceil(-std::log10(scale))), least, most);
}

// Records that the readings leave the range of, at the corners of where they reach; each once.
Findings range_cautions(const ReadingPlan& plan, const Reach& reach) {
  Findings cautions;
  if (reach.empty() || plan.constants_for_benchmark) return cautions;
  for (const double t : {reach.temperature.low, reach.temperature.high}) {
    for (const double p : {reach.pressure.low, reach.pressure.high}) {
      Case c = plan.binding->binding.problem;
      c.contact.temperature = exactly(from_si<Temperature>(t));
      c.contact.absolute_pressure = exactly(from_si<Pressure>(p));
      c.contact.gauge_pressure.reset();
      c.container.reset();
      c.targets.clear();
      Trace trace;
      const auto solved = solve(c, &trace);
      if (refused(solved) != nullptr) continue;
      for (auto& f : judge_ranges(c, trace, plan.widening)) {
        const auto record = f.message.substr(0, f.message.find(' '));
        const bool known = std::any_of(cautions.begin(), cautions.end(), [&](const Finding& k) {
          return k.message.starts_with(record + " ");
        });
        if (!known) cautions.push_back(std::move(f));
      }
    }
  }
  return cautions;
}

class Run {
 public:
  Run(const ReadingsRequest& request, const ReadingPlan& plan,
      const std::function<void(const Findings&)>& notice)
      : request_(request), plan_(plan), notice_(notice) {
    run_.summary.plan = plan.summary;
  }

  ReadingsRun take() {
    if (!go()) run_.system_failed = run_.system_failed || system_failed();
    return std::move(run_);
  }

 private:
  bool fail(const Finding& finding) {
    run_.findings.push_back(finding);
    return false;
  }

  [[nodiscard]] bool system_failed() const {
    return std::any_of(run_.findings.begin(), run_.findings.end(),
                       [](const Finding& f) { return f.code == "file"; });
  }

  bool go() {
    auto source = ByteSource::open(request_.input);
    if (const auto* problem = std::get_if<Finding>(&source)) return fail(*problem);
    CsvReader reader(std::move(std::get<ByteSource>(source)));
    const auto header = reader.header();
    if (const auto* problem = std::get_if<Finding>(&header)) return fail(*problem);
    const std::string& first_line = std::get<std::string>(header);
    FileFormat format = format_of(first_line, reader);
    auto columns = find_columns(first_line, format.dialect, plan_.wishes, reader.name());
    if (!columns) {
      run_.findings = columns.findings;
      return false;
    }
    format.columns = std::move(*columns.value);
    if (format.columns.air && !plan_.binding->binding.problem.container) {
      Finding f = at_line(format.file, 1, "air-without-container",
                          "a volume of air needs to know how much room it has in the package");
      f.expected = "a [container] in the recipe";
      f.example = "[container]\nbrimful = \"345 mL\"\nfill = \"330 mL\"";
      return fail(f);
    }
    reader.set_delimiter(format.dialect.delimiter);
    std::deque<CsvBlock> first;
    bool settled = !format.columns.time;
    while (!settled && first.size() < kMostHeld) {
      CsvBlock block;
      const auto got = reader.next(block);
      if (const auto* problem = std::get_if<Finding>(&got)) return fail(*problem);
      if (!std::get<bool>(got)) break;
      const auto known = settle_times(block, format);
      if (const auto* problem = std::get_if<Finding>(&known)) return fail(*problem);
      settled = std::get<bool>(known);
      first.push_back(std::move(block));
    }
    return judge(format, first_line, reader, std::move(first));
  }

  FileFormat format_of(std::string_view header, const CsvReader& reader) const {
    FileFormat format;
    format.dialect = dialect_of(header);
    format.dialect.crlf = header.ends_with('\r');
    format.file = reader.name();
    format.rejects_as_csv = !request_.rejects.empty();
    format.stop_on_error = request_.stop_on_error;
    format.decimals = decimals_for(plan_);
    return format;
  }

  bool judge(const FileFormat& format, std::string header, CsvReader& reader,
             std::deque<CsvBlock> first) {
    auto out = RowSink::open(request_.out, request_.resume);
    if (const auto* problem = std::get_if<Finding>(&out)) return fail(*problem);
    auto rejects = request_.rejects.empty() ? RowSink::standard_error()
                                            : RowSink::open(request_.rejects, request_.resume);
    if (const auto* problem = std::get_if<Finding>(&rejects)) return fail(*problem);
    auto& rows = std::get<RowSink>(out);
    auto& bad = std::get<RowSink>(rejects);
    if (notice_) notice_({});
    if (header.ends_with('\r')) header.pop_back();
    const std::string line_end = format.dialect.crlf ? "\r\n" : "\n";
    const char d = format.dialect.delimiter;
    auto problem = rows.write(header + added_header(plan_, format) + line_end);
    if (!problem && format.rejects_as_csv) {
      problem = bad.write(fmt::format("line{}reason{}{}{}", d, d, header, line_end));
    }
    if (problem) return fail(*problem);
    Pipeline pipeline(plan_, format, reader, rows, bad, run_.summary);
    pipeline.run(request_.threads, std::move(first));
    run_.findings = pipeline.findings();
    run_.stopped_at = pipeline.stopped_at();
    run_.resumed_from = rows.kept();
    if (!run_.findings.empty() || run_.stopped_at) return false;
    for (auto* sink : {&rows, &bad}) {
      if (auto left = sink->finish()) return fail(*left);
    }
    run_.findings = range_cautions(plan_, pipeline.reach());
    return true;
  }

  const ReadingsRequest& request_;
  const ReadingPlan& plan_;
  const std::function<void(const Findings&)>& notice_;
  ReadingsRun run_;
};

}  // namespace

ReadingsRun judge_readings(const ReadingsRequest& request, const ReadingPlan& plan,
                           const std::function<void(const Findings&)>& notice) {
  return Run(request, plan, notice).take();
}

}  // namespace capsigh
