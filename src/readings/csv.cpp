#include "capsigh/readings/csv.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <bit>
#include <cstring>

#ifdef __SSE2__
#include <emmintrin.h>
#endif

namespace capsigh {
namespace {

constexpr std::size_t kShown = 60;  // bytes of a faulty line that a message repeats

// Calls mark(offset) at every delimiter and line end that is not inside quotes; returns whether the
// text ends inside quotes.
template <class Mark>
bool scan_quoted(std::string_view text, char delimiter, Mark&& mark) {
  bool at_start = true;  // of a field
  std::size_t i = 0;
  while (i < text.size()) {
    const char c = text[i];
    if (at_start && c == '"') {
      for (++i;; ++i) {
        i = text.find('"', i);
        if (i == std::string_view::npos) return true;
        if (i + 1 < text.size() && text[i + 1] == '"') {
          ++i;
        } else {
          break;
        }
      }
    } else if (c == delimiter || c == '\n') {
      mark(i);
      at_start = true;
      ++i;
      continue;
    }
    at_start = false;
    ++i;
  }
  return false;
}

// One past the end of the last whole record, 0 where there is none.
std::size_t whole_records(std::string_view text, char delimiter) {
  if (text.find('"') == std::string_view::npos) return text.rfind('\n') + 1;
  std::size_t end = 0;
  scan_quoted(text, delimiter, [&](std::size_t at) {
    if (text[at] == '\n') end = at + 1;
  });
  return end;
}

#ifdef __SSE2__
// Sixteen bytes at a time.
std::size_t scan_plain(std::string_view text, char delimiter, std::uint32_t* out) {
  const __m128i comma = _mm_set1_epi8(delimiter);
  const __m128i line = _mm_set1_epi8('\n');
  std::size_t n = 0;
  std::size_t i = 0;
  constexpr std::size_t step = sizeof(__m128i);
  for (; i + step <= text.size(); i += step) {
    __m128i bytes;
    std::memcpy(&bytes, text.data() + i, step);
    const auto hits = _mm_or_si128(_mm_cmpeq_epi8(bytes, comma), _mm_cmpeq_epi8(bytes, line));
    auto mask = static_cast<unsigned>(_mm_movemask_epi8(hits));
    while (mask != 0) {
      out[n++] = static_cast<std::uint32_t>(i) + static_cast<std::uint32_t>(std::countr_zero(mask));
      mask &= mask - 1;
    }
  }
  for (; i < text.size(); ++i) {
    if (text[i] == delimiter || text[i] == '\n') out[n++] = static_cast<std::uint32_t>(i);
  }
  return n;
}
#else
std::size_t scan_plain(std::string_view text, char delimiter, std::uint32_t* out) {
  std::size_t n = 0;
  for (std::size_t i = 0; i < text.size(); ++i) {
    if (text[i] == delimiter || text[i] == '\n') out[n++] = static_cast<std::uint32_t>(i);
  }
  return n;
}
#endif

std::uint64_t lines_in(std::string_view text) {
  return static_cast<std::uint64_t>(std::count(text.begin(), text.end(), '\n'));
}

}  // namespace

Dialect dialect_of(std::string_view header) {
  std::array<std::pair<char, std::size_t>, 3> found{{{',', 0}, {';', 0}, {'\t', 0}}};
  bool inside = false;
  for (const char c : header) {
    if (c == '"') inside = !inside;
    for (auto& [delimiter, count] : found) {
      if (!inside && c == delimiter) ++count;
    }
  }
  const auto most = std::max_element(
      found.begin(), found.end(), [](const auto& a, const auto& b) { return a.second < b.second; });
  Dialect d;
  d.delimiter = most->second > 0 ? most->first : ',';
  d.decimal_comma = d.delimiter == ';';
  return d;
}

void TextBuffer::grow(std::size_t least) {
  const std::size_t larger = std::max(least, 2 * capacity_);
  auto data = std::make_unique_for_overwrite<char[]>(larger);
  if (size_ > 0) std::memcpy(data.get(), data_.get(), size_);
  data_ = std::move(data);
  capacity_ = larger;
}

void TextBuffer::append(std::string_view text) {
  if (text.empty()) return;
  std::memcpy(room(text.size()), text.data(), text.size());
  size_ += text.size();
}

void find_marks(std::string_view bytes, char delimiter, CsvMarks& marks) {
  if (marks.at.size() < bytes.size()) marks.at.resize(bytes.size());
  marks.quoted = bytes.find('"') != std::string_view::npos;
  marks.count = 0;
  if (!marks.quoted) {
    marks.count = scan_plain(bytes, delimiter, marks.at.data());
    return;
  }
  scan_quoted(bytes, delimiter,
              [&](std::size_t at) { marks.at[marks.count++] = static_cast<std::uint32_t>(at); });
}

std::string_view unquoted(std::string_view field, std::string& scratch) {
  if (field.size() < 2 || field.front() != '"' || field.back() != '"') return field;
  const auto inner = field.substr(1, field.size() - 2);
  if (inner.find('"') == std::string_view::npos) return inner;
  scratch.clear();
  for (std::size_t i = 0; i < inner.size(); ++i) {
    scratch += inner[i];
    if (inner[i] == '"' && i + 1 < inner.size() && inner[i + 1] == '"') ++i;
  }
  return scratch;
}

std::string csv_field(std::string_view text, char delimiter) {
  const std::string special{delimiter, '"', '\r', '\n'};
  if (text.find_first_of(special) == std::string_view::npos) return std::string(text);
  std::string all = "\"";
  for (const char c : text) {
    if (c == '"') all += '"';
    all += c;
  }
  return all + "\"";
}

std::vector<std::string> split_record(std::string_view record, char delimiter) {
  std::vector<std::string> fields;
  std::string scratch;
  std::size_t start = 0;
  const auto take = [&](std::size_t end) {
    fields.emplace_back(unquoted(record.substr(start, end - start), scratch));
    start = end + 1;
  };
  scan_quoted(record, delimiter, [&](std::size_t at) { take(at); });
  take(record.size());
  return fields;
}

CsvReader::CsvReader(ByteSource source, std::size_t block, std::size_t longest)
    : source_(std::move(source)), block_(block), longest_(longest) {}

// Reads on; false at the end.
std::variant<bool, Finding> CsvReader::more(TextBuffer& into) {
  char* room = into.room(block_);
  const auto got = source_.read({room, block_});
  if (const auto* problem = std::get_if<Finding>(&got)) return *problem;
  const std::size_t n = std::get<std::size_t>(got);
  into.end_at(room + n);
  ended_ = ended_ || n == 0;
  return n > 0;
}

std::variant<std::string, Finding> CsvReader::header() {
  const auto end_of_first = [](std::string_view text) {
    bool inside = false;
    for (std::size_t i = 0; i < text.size(); ++i) {
      if (text[i] == '"') inside = !inside;
      if (text[i] == '\n' && !inside) return i;
    }
    return std::string_view::npos;
  };
  TextBuffer text;
  std::size_t end = std::string_view::npos;
  while (!ended_ && text.size() <= longest_ && end == std::string_view::npos) {
    const auto got = more(text);
    if (const auto* problem = std::get_if<Finding>(&got)) return *problem;
    end = end_of_first(text.view());
  }
  if (end == std::string_view::npos && text.size() > longest_) {
    Finding f;
    f.code = "line-too-long";
    f.message = fmt::format("the first line is longer than {} bytes: no header", longest_);
    f.place = Place{name(), 1, 1, 1, std::string(text.view().substr(0, kShown))};
    return f;
  }
  std::string first(text.view().substr(0, end));
  if (end != std::string_view::npos) held_.append(text.view().substr(end + 1));
  line_ += lines_in(first) + 1;
  constexpr std::string_view bom = "\xEF\xBB\xBF";
  if (first.starts_with(bom)) first.erase(0, bom.size());
  return first;
}

void CsvReader::count(CsvBlock& block) {
  block.sequence = sequence_++;
  block.first_line = line_;
  block.fault.reset();
  line_ += lines_in(block.bytes.view());
}

// What comes after the last whole record waits for the next block.
void CsvReader::keep_whole(CsvBlock& block, std::size_t end) {
  held_.append(block.bytes.view().substr(end));
  block.bytes.shorten(end);
  count(block);
}

// A line that is no record: all of it, or its beginning where it goes on and on.
void CsvReader::make_fault(CsvBlock& block) {
  const auto text = block.bytes.view();
  const std::size_t end = text.find('\n');
  const bool whole = end != std::string_view::npos;
  std::string reason = whole || text.size() <= longest_
                           ? "a quote opens a field and is not closed"
                           : fmt::format("the line is longer than {} bytes", longest_);
  skipping_ = !whole && !ended_;
  keep_whole(block, whole ? end + 1 : text.size());
  auto shown = block.bytes.view().substr(0, kShown);
  while (!shown.empty() && (shown.back() == '\n' || shown.back() == '\r')) {
    shown.remove_suffix(1);
  }
  block.bytes.shorten(shown.size());
  block.fault = std::move(reason);
}

std::variant<bool, Finding> CsvReader::next(CsvBlock& into) {
  TextBuffer& bytes = into.bytes;
  bytes.clear();
  bytes.append(held_.view());
  held_.clear();
  for (;;) {
    if (skipping_) {
      const std::size_t end = bytes.view().find('\n');
      skipping_ = end == std::string_view::npos;
      const std::string rest(skipping_ ? std::string_view() : bytes.view().substr(end + 1));
      bytes.clear();
      bytes.append(rest);
      if (!skipping_) ++line_;
    }
    if (!skipping_) {
      const std::size_t end = whole_records(bytes.view(), delimiter_);
      if (end > 0) {
        keep_whole(into, end);
        return true;
      }
      const bool open = bytes.view().find('"') != std::string_view::npos &&
                        scan_quoted(bytes.view(), delimiter_, [](std::size_t) {});
      if (bytes.size() > longest_ || (ended_ && open)) {
        make_fault(into);
        return true;
      }
      if (ended_ && bytes.size() > 0) {
        bytes.append("\n");
        continue;
      }
    }
    if (ended_) return false;
    const auto got = more(bytes);
    if (const auto* problem = std::get_if<Finding>(&got)) return *problem;
  }
}

}  // namespace capsigh
