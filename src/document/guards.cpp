#include "guards.hpp"

#include <fmt/format.h>

#include <algorithm>

namespace capsigh::document_detail {
namespace {

Finding at(std::string_view text, const std::string& file, std::size_t offset, std::string code,
           std::string message, std::string expected) {
  Finding f;
  f.code = std::move(code);
  f.message = std::move(message);
  f.expected = std::move(expected);
  f.place = place_at(text, file, offset);
  return f;
}

bool continuation(char c) { return (static_cast<unsigned char>(c) & 0xC0U) == 0x80U; }

// Length of the UTF-8 sequence that starts here, 0 if it is malformed (RFC 3629).
std::size_t sequence_length(std::string_view rest) {
  const auto byte = [&](std::size_t i) { return static_cast<unsigned char>(rest[i]); };
  const unsigned first = byte(0);
  if (first < 0x80U) return 1;
  std::size_t length = 0;
  if (first >= 0xC2U && first <= 0xDFU) length = 2;
  if (first >= 0xE0U && first <= 0xEFU) length = 3;
  if (first >= 0xF0U && first <= 0xF4U) length = 4;
  if (length == 0 || rest.size() < length) return 0;
  for (std::size_t i = 1; i < length; ++i) {
    if (!continuation(rest[i])) return 0;
  }
  const unsigned second = byte(1);
  const bool overlong = (first == 0xE0U && second < 0xA0U) || (first == 0xF0U && second < 0x90U);
  const bool surrogate = first == 0xEDU && second >= 0xA0U;
  const bool beyond = first == 0xF4U && second >= 0x90U;
  return overlong || surrogate || beyond ? 0 : length;
}

bool forbidden_control(char c) {
  const auto byte = static_cast<unsigned char>(c);
  return (byte < 0x20U && c != '\t' && c != '\n' && c != '\r') || byte == 0x7FU;
}

std::optional<Finding> not_text(std::string_view text, const std::string& file) {
  for (std::size_t i = 0; i < text.size();) {
    if (forbidden_control(text[i])) {
      return at(text, file, i, "not-text",
                fmt::format("the byte 0x{:02X} does not belong in a text file",
                            static_cast<unsigned char>(text[i])),
                "a plain text file in TOML");
    }
    const std::size_t length = sequence_length(text.substr(i));
    if (length == 0) {
      return at(text, file, i, "not-utf8",
                fmt::format("the byte 0x{:02X} is not part of valid UTF-8",
                            static_cast<unsigned char>(text[i])),
                "a text saved as UTF-8 ('±' can also be written '+/-', '°C' as 'degC')");
    }
    i += length;
  }
  return std::nullopt;
}

// Skips texts and comments as TOML writes them, so that only brackets and dots of the structure
// count. An unclosed one-line text ends with its line: the parser stops there too.
class StructureScanner {
 public:
  explicit StructureScanner(std::string_view text) : text_(text) {}

  // The next character that is structure, or npos at the end.
  std::size_t next() {
    while (at_ < text_.size()) {
      const char c = text_[at_];
      if (c == '#') {
        skip_comment();
      } else if (c == '"' || c == '\'') {
        skip_quoted(c);
      } else {
        return at_++;
      }
    }
    return std::string_view::npos;
  }

 private:
  void skip_comment() {
    while (at_ < text_.size() && text_[at_] != '\n') ++at_;
  }

  void skip_quoted(char quote) {
    const std::string fence(3, quote);
    const bool multiline = text_.substr(at_, fence.size()) == fence;
    at_ += multiline ? fence.size() : 1;
    while (at_ < text_.size()) {
      if (text_[at_] == '\\' && quote == '"') {
        at_ += 2;
      } else if (multiline && text_.substr(at_, fence.size()) == fence) {
        at_ += fence.size();
        return;
      } else if (!multiline && (text_[at_] == quote || text_[at_] == '\n')) {
        if (text_[at_] == quote) ++at_;
        return;
      } else {
        ++at_;
      }
    }
  }

  std::string_view text_;
  std::size_t at_ = 0;
};

// Brackets and the dots of a dotted key both nest; dots count per line.
std::optional<Finding> too_deep(std::string_view text, const std::string& file, std::size_t limit) {
  StructureScanner scanner(text);
  std::size_t brackets = 0;
  std::size_t dots = 0;
  for (std::size_t i = scanner.next(); i != std::string_view::npos; i = scanner.next()) {
    const char c = text[i];
    if (c == '\n') dots = 0;
    if (c == '[' || c == '{') ++brackets;
    if ((c == ']' || c == '}') && brackets > 0) --brackets;
    if (c == '.') ++dots;
    if (brackets > limit || dots > limit) {
      return at(text, file, i, "too-deep",
                fmt::format("values nest deeper than {} levels here", limit),
                "sections one or two levels deep");
    }
  }
  return std::nullopt;
}

// Every place keeps its line; thousands of values on one endless line would cost gigabytes.
std::optional<Finding> too_wide(std::string_view text, const std::string& file, std::size_t limit) {
  for (std::size_t start = 0; start < text.size();) {
    const std::size_t end = std::min(text.find('\n', start), text.size());
    if (end - start > limit) {
      Finding f;
      f.code = "line-too-long";
      f.message = fmt::format("a line has {} bytes; at most {} are read", end - start, limit);
      f.place = Place{file, 0, 0, 1, ""};
      return f;
    }
    start = end + 1;
  }
  return std::nullopt;
}

}  // namespace

Place place_at(std::string_view text, const std::string& file, std::size_t offset) {
  offset = std::min(offset, text.size());
  const std::size_t before = offset == 0 ? std::string_view::npos : text.rfind('\n', offset - 1);
  const std::size_t start = before == std::string_view::npos ? 0 : before + 1;
  const std::size_t end = std::min(text.find('\n', start), text.size());
  Place place;
  place.file = file;
  place.line = 1 + static_cast<std::size_t>(std::count(
                       text.begin(), text.begin() + static_cast<std::ptrdiff_t>(start), '\n'));
  place.column = offset - start + 1;
  place.line_text = std::string(text.substr(start, end - start));
  return place;
}

std::optional<Finding> guard(std::string_view text, const std::string& file,
                             const DocumentLimits& limits) {
  if (text.size() > limits.bytes) {
    Finding f;
    f.code = "too-long";
    f.message =
        fmt::format("the file has {} bytes; at most {} are read", text.size(), limits.bytes);
    f.place = Place{file, 0, 0, 1, ""};
    return f;
  }
  if (auto f = not_text(text, file)) return f;
  if (auto f = too_wide(text, file, limits.line)) return f;
  return too_deep(text, file, limits.depth);
}

}  // namespace capsigh::document_detail

namespace capsigh {

bool is_utf8(std::string_view text) {
  for (std::size_t i = 0; i < text.size();) {
    const std::size_t length = document_detail::sequence_length(text.substr(i));
    if (length == 0) return false;
    i += length;
  }
  return true;
}

}  // namespace capsigh
