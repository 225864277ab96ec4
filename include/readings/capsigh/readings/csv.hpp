// Comma separated values as RFC 4180 has them: fields split by one delimiter, quoted where they
// hold it, a quote or a line end; quotes inside are doubled. Also split by semicolon (then numbers
// have a decimal comma) or tabulator. Lines end on LF or CRLF; the last one need not. A byte order
// mark is skipped.
#pragma once

#include <cstdint>
#include <memory>
#include <optional>
#include <string>
#include <string_view>
#include <variant>
#include <vector>

#include "capsigh/readings/source.hpp"

namespace capsigh {

struct Dialect {
  char delimiter = ',';
  bool decimal_comma = false;
  bool crlf = false;  ///< how lines are ended in the output
};

/// The dialect of a header line: the delimiter that stands in it most often outside quotes.
Dialect dialect_of(std::string_view header);

/// Text that grows without being filled first.
class TextBuffer {
 public:
  void clear() { size_ = 0; }
  [[nodiscard]] std::size_t size() const { return size_; }
  [[nodiscard]] std::string_view view() const { return {data_.get(), size_}; }
  /// Room for that many more characters, from where the text ends.
  char* room(std::size_t more) {
    if (size_ + more > capacity_) grow(size_ + more);
    return data_.get() + size_;
  }
  void end_at(const char* end) { size_ = static_cast<std::size_t>(end - data_.get()); }
  void shorten(std::size_t size) { size_ = size; }
  void append(std::string_view text);

 private:
  void grow(std::size_t least);

  std::unique_ptr<char[]> data_;
  std::size_t size_ = 0;
  std::size_t capacity_ = 0;
};

/// One stretch of whole records, to be worked on by one thread.
struct CsvBlock {
  std::uint64_t sequence = 0;
  std::uint64_t first_line = 1;
  TextBuffer bytes;
  /// Instead of records: a line that is none, and why.
  std::optional<std::string> fault;
};

/// Where the fields of a block's records end: offsets of delimiters and of line ends, in order.
struct CsvMarks {
  std::vector<std::uint32_t> at;  ///< the first `count` of them
  std::size_t count = 0;
  bool quoted = false;  ///< some field begins with a quote
};
void find_marks(std::string_view bytes, char delimiter, CsvMarks& marks);

/// A field without its quotes; `scratch` holds it where quotes inside were doubled.
std::string_view unquoted(std::string_view field, std::string& scratch);

/// A field as it stands in a file of that delimiter.
std::string csv_field(std::string_view text, char delimiter);

/// Splits one record.
std::vector<std::string> split_record(std::string_view record, char delimiter);

/// Cuts a source into blocks of whole records.
class CsvReader {
 public:
  /// Blocks of about `block` bytes; a record longer than `longest` is a fault, not a record.
  explicit CsvReader(ByteSource source, std::size_t block = std::size_t{1} << 18U,
                     std::size_t longest = std::size_t{1} << 20U);

  /// The first record, without its line end; empty where there is none.
  std::variant<std::string, Finding> header();
  void set_delimiter(char delimiter) { delimiter_ = delimiter; }

  /// The next block; false at the end. A block may hold a fault instead of records.
  std::variant<bool, Finding> next(CsvBlock& into);

  [[nodiscard]] const std::string& name() const { return source_.name(); }

 private:
  std::variant<bool, Finding> more(TextBuffer& into);
  void count(CsvBlock& block);
  void keep_whole(CsvBlock& block, std::size_t end);
  void make_fault(CsvBlock& block);

  ByteSource source_;
  std::size_t block_;
  std::size_t longest_;
  char delimiter_ = ',';
  TextBuffer held_;  ///< read, not yet given out: less than a record
  std::uint64_t line_ = 1;
  std::uint64_t sequence_ = 0;
  bool ended_ = false;
  bool skipping_ = false;  ///< inside a line that was too long
};

}  // namespace capsigh
