#include "rows.hpp"

#include <fast_float/fast_float.h>
#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <cstring>
#include <tuple>

#include "capsigh/answer/solve.hpp"

namespace capsigh::readings_detail {
namespace {

constexpr int kProbabilityDecimals = 4;
constexpr double kCoverage = 2;  // k of the U in the output
// What a row may grow by: four numbers, a verdict and what would decide it.
constexpr std::size_t kMostAdded = 3 * FixedPoint::kMost + 200;
constexpr double kNoContent = -1;

std::string_view word(Verdict verdict) {
  switch (verdict) {
    case Verdict::inside: return "inside";
    case Verdict::outside: return "outside";
    case Verdict::undecided: break;
  }
  return "undecided";
}

std::string_view trimmed(std::string_view text) {
  while (!text.empty() && (text.front() == ' ' || text.front() == '\t')) text.remove_prefix(1);
  while (!text.empty() && (text.back() == ' ' || text.back() == '\t')) text.remove_suffix(1);
  return text;
}

char* put(char* to, std::string_view text) {
  std::memcpy(to, text.data(), text.size());
  return to + text.size();
}

std::string_view fault_words(TimeFault fault) {
  switch (fault) {
    case TimeFault::impossible: return "is no time that exists";
    case TimeFault::ambiguous: return "could be day first or month first";
    default: return "is no time";
  }
}

}  // namespace

void Reach::take(double kelvin, double pascal) {
  temperature = {std::min(temperature.low, kelvin), std::max(temperature.high, kelvin)};
  pressure = {std::min(pressure.low, pascal), std::max(pressure.high, pascal)};
}

void Reach::take(const Reach& other) {
  if (other.empty()) return;
  take(other.temperature.low, other.pressure.low);
  take(other.temperature.high, other.pressure.high);
}

void JudgedBlock::clear() {
  reach = {};
  out.clear();
  rejects.clear();
  rows.clear();
  keys.clear();
}

std::string added_header(const ReadingPlan& plan, const FileFormat& format) {
  std::string all;
  const auto add = [&](std::string name) {
    const auto& names = format.columns.names;
    if (std::find(names.begin(), names.end(), name) != names.end()) name = "capsigh " + name;
    all += format.dialect.delimiter + csv_field(name, format.dialect.delimiter);
  };
  add(fmt::format("content [{}]", plan.unit->text));
  add(fmt::format("U [{}]", plan.unit->text));
  if (!plan.judges()) return all;
  add("verdict");
  add("probability");
  if (plan.rule.guarded) add("decided by");
  return all;
}

std::string reject_text(const FileFormat& format, std::uint64_t line, std::string_view reason,
                        std::string_view row) {
  const char d = format.dialect.delimiter;
  if (format.rejects_as_csv) {
    return fmt::format("{}{}{}{}{}{}", line, d, csv_field(reason, d), d, row,
                       format.dialect.crlf ? "\r\n" : "\n");
  }
  return fmt::format("{}:{}: rejected: {}\n    {}\n", format.file, line, reason, row);
}

OrRefusal<std::pair<double, double>> ModelledReadings::content_and_u(const GaugeReading& reading) {
  constexpr double none = -1;
  const Key key{reading.temperature.kelvin(), reading.pressure.above_ambient().value(),
                reading.air ? reading.air->value() : none,
                reading.ambient ? reading.ambient->value() : none};
  if (const auto it = kept_.find(key); it != kept_.end()) return it->second;
  constexpr std::size_t most_kept = 1U << 16U;
  if (kept_.size() >= most_kept) kept_.clear();
  const auto read = read_with_doubt(binding_.binding.problem, binding_, reading);
  OrRefusal<std::pair<double, double>> result;
  if (const auto* no = refused(read)) {
    result = *no;
  } else {
    const auto& content = std::get<ReadContent>(read);
    result = std::pair{content.value, content.u};
  }
  kept_.emplace(key, result);
  return result;
}

RowJudge::RowJudge(const ReadingPlan& plan, const FileFormat& format)
    : plan_(plan),
      format_(format),
      content_(format.decimals, format.dialect.decimal_comma ? ',' : '.'),
      probability_(kProbabilityDecimals, format.dialect.decimal_comma ? ',' : '.'),
      per_unit_(1.0 / plan.unit->factor),
      deciding_(plan, format.columns),
      doubt_(plan.doubt),
      modelled_(*plan.binding) {
  // An ambient measured with the reading, or an absolute pressure, is not the recipe's.
  if (format.columns.ambient || !format.columns.gauge) doubt_.ambient = Pressure{};
  if (format.columns.content) {
    from_column_ = plan.laws->per_molality(plan.measure()) /
                   plan.laws->per_molality(format.columns.content_measure);
  }
}

std::string_view RowJudge::field(std::string_view bytes, std::size_t first, std::size_t begin,
                                 std::size_t column) {
  const std::size_t from = column == 0 ? begin : marks_.at[first + column - 1] + 1;
  std::size_t to = marks_.at[first + column];
  if (to > from && bytes[to - 1] == '\r') --to;
  const auto text = bytes.substr(from, to - from);
  return marks_.quoted ? unquoted(text, scratch_) : text;
}

void RowJudge::reject(std::string reason) {
  records_.back().reason = static_cast<std::uint32_t>(reasons_.size());
  reasons_.push_back(std::move(reason));
}

bool RowJudge::number(std::string_view text, const NumberColumn& column, double& si) const {
  text = trimmed(text);
  if (!text.empty() && text.front() == '+') text.remove_prefix(1);
  const bool comma = format_.dialect.decimal_comma && text.find(',') != std::string_view::npos;
  const fast_float::parse_options how{fast_float::chars_format::general, comma ? ',' : '.'};
  double value = 0;
  const char* end = text.data() + text.size();
  const auto read = fast_float::from_chars_advanced(text.data(), end, value, how);
  if (read.ec != std::errc() || read.ptr != end || !std::isfinite(value)) return false;
  si = value * column.factor + column.offset;
  return std::isfinite(si);
}

// Temperature and pressure of a record, or its content.
bool RowJudge::take_reading(std::string_view bytes, std::size_t first, std::size_t begin) {
  const Columns& c = format_.columns;
  const auto read = [&](const NumberColumn& column, double& si) {
    const auto text = field(bytes, first, begin, column.at);
    if (number(text, column, si)) return true;
    const auto& name = c.names[column.at];
    reject(trimmed(text).empty() ? fmt::format("'{}' is empty", name)
                                 : fmt::format("'{}' in '{}' is no number", text, name));
    return false;
  };
  if (c.content) {
    const bool given = !trimmed(field(bytes, first, begin, c.content->at)).empty();
    if (given || !c.temperature || !c.pressure) {
      double content = 0;
      if (!read(*c.content, content)) return false;
      if (content < 0) {
        reject("a content cannot be negative");
        return false;
      }
      temperature_.push_back(0);
      pressure_.push_back(0);
      direct_.push_back(content * from_column_);
      any_direct_ = true;
      return true;
    }
  }
  double t = 0;
  double p = 0;
  double ambient = plan_.ambient.value();
  if (!read(*c.temperature, t) || !read(*c.pressure, p)) return false;
  if (c.ambient && !read(*c.ambient, ambient)) return false;
  std::optional<Volume> air;
  if (c.air && !trimmed(field(bytes, first, begin, c.air->at)).empty()) {
    double volume = 0;
    if (!read(*c.air, volume)) return false;
    if (volume < 0) {
      reject("a volume of air cannot be negative");
      return false;
    }
    air = from_si<Volume>(volume);
  }
  if (air || plan_.pierced) {
    GaugeReading reading;
    reading.temperature = from_si<Temperature>(t);
    reading.pressure = from_si<GaugePressure>(c.gauge ? p : p - ambient);
    reading.air = air;
    if (c.ambient) reading.ambient = from_si<Pressure>(ambient);
    by_model_.emplace_back(static_cast<std::uint32_t>(temperature_.size()), reading);
  }
  temperature_.push_back(t + plan_.temperature_offset.value());
  pressure_.push_back((c.gauge ? p + ambient : p) + plan_.pressure_offset.value());
  direct_.push_back(kNoContent);
  return true;
}

bool RowJudge::take_time(std::string_view text, JudgedRow& row) {
  text = trimmed(text);
  if (text.empty()) {
    reject("the time is empty");
    return false;
  }
  const auto read = read_time(text, format_.columns.dates);
  if (read.fault != TimeFault::none) {
    reject(fmt::format("'{}' {}", text, fault_words(read.fault)));
    return false;
  }
  if (read.time.zoned != format_.zoned) {
    reject(fmt::format("'{}' has {} zone, unlike the first time of the file", text,
                       read.time.zoned ? "a" : "no"));
    return false;
  }
  row.timed = true;
  row.time = read.time.seconds;
  return true;
}

void RowJudge::take_keys(std::string_view bytes, std::size_t first, std::size_t begin,
                         JudgedBlock& out, JudgedRow& row) {
  const Columns& c = format_.columns;
  row.group = static_cast<std::uint32_t>(out.keys.size());
  for (std::size_t i = 0; i < c.groups.size(); ++i) {
    if (i > 0) out.keys += kGroupSeparator;
    out.keys += trimmed(field(bytes, first, begin, c.groups[i]));
  }
  row.group_size = static_cast<std::uint32_t>(out.keys.size()) - row.group;
  if (!c.label) return;
  out.keys += trimmed(field(bytes, first, begin, *c.label));
  row.label_size = static_cast<std::uint32_t>(out.keys.size()) - row.group - row.group_size;
}

bool RowJudge::parse_record(std::string_view bytes, std::size_t first, std::size_t begin,
                            JudgedBlock& out) {
  JudgedRow& row = out.rows.back();
  if (!take_reading(bytes, first, begin)) return false;
  const Columns& c = format_.columns;
  if (c.time && !take_time(field(bytes, first, begin, *c.time), row)) {
    temperature_.pop_back();
    pressure_.pop_back();
    direct_.pop_back();
    if (!by_model_.empty() && by_model_.back().first == temperature_.size()) by_model_.pop_back();
    return false;
  }
  if (!c.groups.empty() || c.label) take_keys(bytes, first, begin, out, row);
  return true;
}

void RowJudge::parse(const CsvBlock& block, JudgedBlock& out) {
  const std::string_view bytes = block.bytes.view();
  const Columns& columns = format_.columns;
  find_marks(bytes, format_.dialect.delimiter, marks_);
  std::uint64_t line = block.first_line;
  std::size_t begin = 0;
  std::size_t i = 0;
  while (i < marks_.count) {
    const std::size_t first = i;
    while (bytes[marks_.at[i]] != '\n') ++i;
    const std::size_t newline = marks_.at[i++];
    std::size_t end = newline;
    if (end > begin && bytes[end - 1] == '\r') --end;
    const std::size_t fields = i - first;
    if (end > begin) {  // a blank line is no record
      records_.push_back({begin, end, line, static_cast<std::uint32_t>(temperature_.size()), 0});
      JudgedRow& row = out.rows.emplace_back();
      if (fields != columns.count) {
        reject(fmt::format("{} field{} where the header names {}", fields, fields == 1 ? "" : "s",
                           columns.count));
        row.rejected = true;
      } else {
        row.rejected = !parse_record(bytes, first, begin, out);
      }
      if (row.rejected && format_.stop_on_error) return;
    }
    line += marks_.quoted ? static_cast<std::uint64_t>(std::count(
                                bytes.begin() + static_cast<std::ptrdiff_t>(begin),
                                bytes.begin() + static_cast<std::ptrdiff_t>(newline) + 1, '\n'))
                          : 1;
    begin = newline + 1;
  }
}

void RowJudge::compute() {
  block_.resize(temperature_.size());
  std::copy(temperature_.begin(), temperature_.end(), block_.temperature.begin());
  std::copy(pressure_.begin(), pressure_.end(), block_.pressure.begin());
  if (plan_.constants_for_benchmark) {
    const double middle = plan_.judges() ? plan_.limits.low : 1.0;
    std::fill(block_.content.begin(), block_.content.end(), middle);
    std::fill(block_.u.begin(), block_.u.end(), 0.01 * middle);
    std::fill(block_.probability.begin(), block_.probability.end(), 0.99);
    std::fill(block_.inside_model.begin(), block_.inside_model.end(), std::uint8_t{1});
    return;
  }
  plan_.kernel->evaluate(block_, doubt_);
  for (const auto& [row, reading] : by_model_) {
    const auto found = modelled_.content_and_u(reading);
    const auto* no = refused(found);
    block_.inside_model[row] = no == nullptr ? 1 : 0;
    if (no != nullptr) {
      refusals_.emplace_back(row, *no);
      continue;
    }
    std::tie(block_.content[row], block_.u[row]) = std::get<std::pair<double, double>>(found);
  }
  if (any_direct_) {
    for (std::size_t i = 0; i < direct_.size(); ++i) {
      if (direct_[i] == kNoContent) continue;
      block_.content[i] = direct_[i];
      block_.u[i] = 0;
      block_.inside_model[i] = 1;
    }
  }
  if (plan_.judges()) Kernel::conformity(block_, plan_.limits);
}

Verdict RowJudge::verdict_of(std::size_t row) const {
  const double p = block_.probability[row];
  if (!plan_.rule.guarded || !(block_.u[row] > 0)) {
    return plan_.limits.contains(block_.content[row]) ? Verdict::inside : Verdict::outside;
  }
  if (p >= 1.0 - plan_.rule.risk) return Verdict::inside;
  return p <= plan_.rule.risk ? Verdict::outside : Verdict::undecided;
}

char* RowJudge::put_results(char* to, std::size_t row, JudgedRow& judged) {
  const char d = format_.dialect.delimiter;
  judged.value = block_.content[row] * per_unit_;
  *to++ = d;
  to = content_.write(to, judged.value);
  *to++ = d;
  // Without a stated doubt there is no U to show.
  if (block_.u[row] > 0) to = content_.write(to, kCoverage * block_.u[row] * per_unit_);
  if (!plan_.judges()) return to;
  judged.judged = true;
  judged.verdict = verdict_of(row);
  *to++ = d;
  to = readings_detail::put(to, word(judged.verdict));
  *to++ = d;
  to = probability_.write(to, block_.probability[row]);
  if (!plan_.rule.guarded) return to;
  *to++ = d;
  if (judged.verdict == Verdict::undecided) {
    to = readings_detail::put(to, deciding_.of(block_.temperature[row], block_.pressure[row],
                                               block_.content[row], block_.u[row]));
  }
  return to;
}

std::string RowJudge::why_refused(std::uint32_t row) const {
  for (const auto& [of, no] : refusals_) {
    if (of == row) return explain(no).message;
  }
  const auto no = plan_.kernel->refusal(block_.temperature[row], block_.pressure[row]);
  return no ? explain(*no).message : "there is no content at this reading";
}

void RowJudge::put(std::string_view bytes, JudgedBlock& out) {
  const std::string_view line_end = format_.dialect.crlf ? "\r\n" : "\n";
  for (std::size_t i = 0; i < records_.size(); ++i) {
    Record& record = records_[i];
    JudgedRow& judged = out.rows[i];
    const auto text = bytes.substr(record.begin, record.end - record.begin);
    if (!judged.rejected && block_.inside_model[record.row] == 0) {
      judged.rejected = true;
      record.reason = static_cast<std::uint32_t>(reasons_.size());
      reasons_.push_back(why_refused(record.row));
    }
    if (judged.rejected) {
      out.rejects += reject_text(format_, record.line, reasons_[record.reason], text);
      if (!format_.stop_on_error) continue;
      out.rows.resize(i + 1);
      return;
    }
    if (direct_[record.row] == kNoContent) {
      out.reach.take(block_.temperature[record.row], block_.pressure[record.row]);
    }
    char* to = readings_detail::put(out.out.room(text.size() + kMostAdded), text);
    to = put_results(to, record.row, judged);
    out.out.end_at(readings_detail::put(to, line_end));
  }
}

void RowJudge::judge(const CsvBlock& block, JudgedBlock& out) {
  out.clear();
  records_.clear();
  reasons_.clear();
  temperature_.clear();
  pressure_.clear();
  direct_.clear();
  any_direct_ = false;
  by_model_.clear();
  refusals_.clear();
  if (block.fault) {
    out.rows.emplace_back().rejected = true;
    out.rejects = reject_text(format_, block.first_line, *block.fault, block.bytes.view());
    return;
  }
  parse(block, out);
  compute();
  put(block.bytes.view(), out);
}

}  // namespace capsigh::readings_detail
