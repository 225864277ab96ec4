// From a block of records to a block of judged rows: what one thread does by itself.
#pragma once

#include <array>
#include <cstdint>
#include <limits>
#include <map>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "capsigh/readings/csv.hpp"
#include "capsigh/readings/fixed.hpp"
#include "capsigh/readings/plan.hpp"
#include "deciding.hpp"

namespace capsigh::readings_detail {

// One record, accepted or not.
struct JudgedRow {
  bool rejected = false;
  bool timed = false;
  bool judged = false;
  Verdict verdict = Verdict::undecided;
  double value = 0;         // in the unit of the plan
  double time = 0;          // s
  std::uint32_t group = 0;  // where its group begins in `keys`; its label follows
  std::uint32_t group_size = 0;
  std::uint32_t label_size = 0;
};

// From where to where readings reach, corrected: K and Pa absolute.
struct Reach {
  Interval temperature{std::numeric_limits<double>::infinity(),
                       -std::numeric_limits<double>::infinity()};
  Interval pressure = temperature;

  void take(double kelvin, double pascal);
  void take(const Reach& other);
  [[nodiscard]] bool empty() const { return !(temperature.low <= temperature.high); }
};

struct JudgedBlock {
  Reach reach;
  TextBuffer out;
  std::string rejects;
  std::vector<JudgedRow> rows;
  std::string keys;  // groups and labels

  void clear();
};

// How one file is read.
struct FileFormat {
  Dialect dialect;
  Columns columns;
  std::string file;  // for messages
  bool rejects_as_csv = false;
  bool stop_on_error = false;
  bool zoned = false;  // times have zones
  int decimals = 4;
};

// The columns that are added to the input's, as a header line has them, delimiter first.
std::string added_header(const ReadingPlan& plan, const FileFormat& format);

// What a rejected row looks like.
std::string reject_text(const FileFormat& format, std::uint64_t line, std::string_view reason,
                        std::string_view row);

// Readings with air in the package, or through a piercer: by the model itself, reading by reading.
// Instruments have finite steps, so the same readings come again and are kept.
class ModelledReadings {
 public:
  explicit ModelledReadings(const ReadingBinding& binding) : binding_(binding) {}
  OrRefusal<std::pair<double, double>> content_and_u(const GaugeReading& reading);

 private:
  using Key = std::array<double, 4>;
  const ReadingBinding& binding_;
  std::map<Key, OrRefusal<std::pair<double, double>>> kept_;
};

class RowJudge {
 public:
  RowJudge(const ReadingPlan& plan, const FileFormat& format);

  void judge(const CsvBlock& block, JudgedBlock& out);

 private:
  struct Record {
    std::size_t begin = 0;  // offsets in the block
    std::size_t end = 0;    // without the line end
    std::uint64_t line = 0;
    std::uint32_t row = 0;     // in the kernel's block
    std::uint32_t reason = 0;  // why it is rejected, in `reasons_`
  };

  void parse(const CsvBlock& block, JudgedBlock& out);
  bool parse_record(std::string_view bytes, std::size_t first, std::size_t begin, JudgedBlock& out);
  [[nodiscard]] std::string_view field(std::string_view bytes, std::size_t first, std::size_t begin,
                                       std::size_t column);
  bool number(std::string_view text, const NumberColumn& column, double& si) const;
  bool take_reading(std::string_view bytes, std::size_t first, std::size_t begin);
  bool take_time(std::string_view text, JudgedRow& row);
  void take_keys(std::string_view bytes, std::size_t first, std::size_t begin, JudgedBlock& out,
                 JudgedRow& row);
  void reject(std::string reason);
  void compute();
  void put(std::string_view bytes, JudgedBlock& out);
  [[nodiscard]] std::string why_refused(std::uint32_t row) const;
  char* put_results(char* to, std::size_t row, JudgedRow& judged);
  [[nodiscard]] Verdict verdict_of(std::size_t row) const;

  const ReadingPlan& plan_;
  const FileFormat& format_;
  FixedPoint content_;
  FixedPoint probability_;
  double per_unit_;         // numbers in the output's unit per SI unit
  double from_column_ = 1;  // direct content to the plan's measure
  DecidingInstrument deciding_;
  CsvMarks marks_;
  std::vector<Record> records_;
  std::vector<std::string> reasons_;
  ReadingBlock block_;
  std::vector<double> temperature_;
  std::vector<double> pressure_;
  std::vector<double> direct_;  // content measured otherwise, or below zero
  bool any_direct_ = false;
  InstrumentDoubt doubt_;
  ModelledReadings modelled_;
  std::vector<std::pair<std::uint32_t, GaugeReading>> by_model_;  // rows that the model answers
  std::vector<std::pair<std::uint32_t, Refusal>> refusals_;       // of those
  std::string scratch_;
  std::string date_;  // of the last time read, and what it means
  double date_seconds_ = 0;
};

}  // namespace capsigh::readings_detail
