#include "wrap.hpp"

#include <algorithm>

#include "capsigh/document/document.hpp"

namespace capsigh::render_detail {

namespace {
constexpr std::size_t kPage = 80;
constexpr char kKeptSpace = '\x1f';
}  // namespace

std::string printable(std::string_view text) {
  const bool whole = is_utf8(text);
  std::string out;
  for (const char c : text) {
    const auto byte = static_cast<unsigned char>(c);
    const bool broken = byte >= 0x80U && !whole;
    out += broken ? '?' : (byte < 0x20U || byte == 0x7FU ? ' ' : c);
  }
  return out;
}

std::size_t columns(std::string_view text) {
  std::size_t count = 0;
  for (const char c : text) {
    if ((static_cast<unsigned char>(c) & 0xC0U) != 0x80U) ++count;
  }
  return count;
}

std::string padded(std::string_view text, std::size_t width) {
  std::string out(text);
  const std::size_t used = columns(text);
  if (used < width) out.append(width - used, ' ');
  return out;
}

std::string wrapped(std::string_view head, std::string_view text) {
  const std::string indent(columns(head), ' ');
  std::string out;
  std::string line(head);
  bool empty = true;
  while (!text.empty()) {
    const std::size_t space = text.find(' ');
    const std::string_view word = text.substr(0, space);
    text = space == std::string_view::npos ? std::string_view{} : text.substr(space + 1);
    if (!empty && columns(line) + 1 + columns(word) > kPage) {
      out += line + "\n";
      line = indent;
      empty = true;
    }
    if (!empty) line += ' ';
    line += word;
    std::replace(line.begin(), line.end(), kKeptSpace, ' ');
    empty = false;
  }
  return out + line + "\n";
}

}  // namespace capsigh::render_detail
