// Where rows go: standard output, or a file that an interrupted run can be resumed into.
//
// The rows of a run depend on its input and recipe alone. A resumed run therefore works through the
// input from its beginning, compares what it would write with what stands in the file, and appends
// from where the file ends, be that in the middle of a row: no row is lost or doubled, and a file
// that was written from something else is found out.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <variant>
#include <vector>

#include "capsigh/quantity/finding.hpp"

namespace capsigh {

class RowSink {
 public:
  /// Standard output for an empty path. With `resume` what stands in the file is kept and compared.
  static std::variant<RowSink, Finding> open(const std::string& path, bool resume);

  /// Standard error.
  static std::variant<RowSink, Finding> standard_error();

  RowSink(RowSink&& other) noexcept;
  RowSink& operator=(RowSink&& other) noexcept;
  ~RowSink();

  /// Writes at once. A finding where the system fails, or where a resumed file holds other bytes.
  std::optional<Finding> write(std::string_view bytes);

  /// After the last row: a resumed file that holds more than all rows is found out.
  std::optional<Finding> finish();

  /// Bytes of this run that stood in the file already.
  [[nodiscard]] std::uint64_t kept() const { return kept_; }

 private:
  RowSink(std::string name, int descriptor, bool owned);
  std::optional<Finding> compare(std::string_view& bytes);
  [[nodiscard]] Finding differs() const;

  std::string name_;
  int descriptor_ = -1;
  bool owned_ = false;
  bool comparing_ = false;
  std::uint64_t kept_ = 0;
  std::vector<char> stood_;  ///< a stretch of the file, for comparing
};

}  // namespace capsigh
