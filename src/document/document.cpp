#include "capsigh/document/document.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <sstream>
#include <toml.hpp>
#include <tuple>

#include "guards.hpp"

namespace capsigh {
namespace {

using Value = toml::basic_value<toml::discard_comments>;

Place place_of(const Value& value, const std::string& file) {
  const auto location = value.location();
  return {file, location.line(), location.column(), std::max<std::size_t>(location.region(), 1),
          location.line_str()};
}

bool word_at(const std::string& line, std::size_t position, std::size_t length) {
  const auto part_of_word = [](char c) {
    return std::isalnum(static_cast<unsigned char>(c)) != 0 || c == '_' || c == '-';
  };
  const bool before = position > 0 && part_of_word(line[position - 1]);
  const std::size_t end = position + length;
  const bool after = end < line.size() && part_of_word(line[end]);
  return !before && !after;
}

std::optional<std::size_t> last_word(const std::string& line, const std::string& word,
                                     std::size_t from) {
  for (std::size_t at = line.rfind(word, from); at != std::string::npos;
       at = at == 0 ? std::string::npos : line.rfind(word, at - 1)) {
    if (word_at(line, at, word.size())) return at;
  }
  return std::nullopt;
}

// The library keeps no place for keys. A key stands before its value on the value's line, or inside
// the header that opens its table, which is the table's own place.
Place key_place(const std::string& key, const Node& value) {
  Place place = value.place;
  const std::size_t value_at = place.column > 0 ? place.column - 1 : 0;
  auto found = value_at > 0 ? last_word(place.line_text, key, value_at - 1) : std::nullopt;
  if (!found) found = last_word(place.line_text, key, place.line_text.size());
  if (!found) return place;
  place.column = *found + 1;
  place.length = std::max<std::size_t>(key.size(), 1);
  return place;
}

Node convert(const Value& value, const std::string& file);

void convert_table(const Value& value, const std::string& file, Node& node) {
  node.kind = Node::Kind::table;
  for (const auto& [key, child] : value.as_table()) {
    Node converted = convert(child, file);
    Place place = key_place(key, converted);
    node.members.push_back({key, std::move(place), std::move(converted)});
  }
  std::stable_sort(node.members.begin(), node.members.end(), [](const Member& a, const Member& b) {
    return std::tie(a.key_place.line, a.key_place.column, a.key) <
           std::tie(b.key_place.line, b.key_place.column, b.key);
  });
}

Node convert(const Value& value, const std::string& file) {
  Node node;
  node.place = place_of(value, file);
  if (value.is_string()) {
    node.kind = Node::Kind::text;
    node.text = value.as_string().str;
  } else if (value.is_integer()) {
    node.kind = Node::Kind::integer;
    node.integer = value.as_integer();
  } else if (value.is_floating()) {
    node.kind = Node::Kind::real;
    node.real = value.as_floating();
  } else if (value.is_boolean()) {
    node.kind = Node::Kind::boolean;
    node.boolean = value.as_boolean();
  } else if (value.is_array()) {
    node.kind = Node::Kind::array;
    for (const auto& item : value.as_array()) node.items.push_back(convert(item, file));
  } else if (value.is_table()) {
    convert_table(value, file, node);
  }
  return node;
}

// BOM away, CRLF to LF: places then count what an editor shows.
std::string normalized(std::string_view text) {
  if (text.starts_with("\xEF\xBB\xBF")) text.remove_prefix(3);
  std::string out;
  out.reserve(text.size() + 1);
  for (std::size_t i = 0; i < text.size(); ++i) {
    if (text[i] == '\r' && i + 1 < text.size() && text[i + 1] == '\n') continue;
    out += text[i];
  }
  return out;
}

// The library's text is a picture of several lines; its first line, without the function's name,
// says what is wrong.
std::string reason(const std::string& what) {
  std::string first = what.substr(0, what.find('\n'));
  for (const std::string_view prefix : {"[error] ", "toml::"}) {
    if (first.starts_with(prefix)) first.erase(0, prefix.size());
  }
  const std::size_t colon = first.find(": ");
  if (first.starts_with("parse_") && colon != std::string::npos) first.erase(0, colon + 2);
  const std::size_t twice = first.find(") already exists");
  const std::size_t quote = first.find('"');
  if (twice != std::string::npos && quote < twice) {
    return "the key " + first.substr(quote, twice - quote) + " is given twice";
  }
  while (!first.empty() && (first.back() == ' ' || first.back() == '\n')) first.pop_back();
  return first;
}

Finding syntax_finding(const std::string& what, const toml::source_location& at,
                       const std::string& file) {
  Finding f;
  f.code = "toml-syntax";
  const std::string why = reason(what);
  f.message = why.empty() ? "this is not valid TOML" : "this is not valid TOML: " + why;
  f.expected = "key = \"value\", [section] or # comment; a text needs its quotes";
  f.example = "temperature = \"4 degC\"";
  f.place =
      Place{file, at.line(), at.column(), std::max<std::size_t>(at.region(), 1), at.line_str()};
  return f;
}

}  // namespace

const Member* Node::find(std::string_view key) const {
  const auto it =
      std::find_if(members.begin(), members.end(), [&](const Member& m) { return m.key == key; });
  return it == members.end() ? nullptr : &*it;
}

std::string_view kind_name(Node::Kind kind) {
  switch (kind) {
    case Node::Kind::text: return "a text";
    case Node::Kind::integer: return "a whole number";
    case Node::Kind::real: return "a number";
    case Node::Kind::boolean: return "true or false";
    case Node::Kind::array: return "a list";
    case Node::Kind::table: return "a section or { } group";
    case Node::Kind::other: return "a date or time";
  }
  return "a value";
}

Outcome<Node> parse_document(std::string_view raw, const std::string& file,
                             const DocumentLimits& limits) {
  const std::string text = normalized(raw);
  if (auto problem = document_detail::guard(text, file, limits)) return {{}, {*problem}};
  try {
    std::istringstream in(text);
    const auto value = toml::parse<toml::discard_comments>(in, file);
    return {convert(value, file), {}};
  } catch (const toml::exception& e) {
    return {{}, {syntax_finding(e.what(), e.location(), file)}};
  } catch (const std::exception& e) {
    Finding f;
    f.code = "toml-syntax";
    f.message = "this is not valid TOML: " + reason(e.what());
    f.place = Place{file, 0, 0, 1, ""};
    return {{}, {f}};
  }
}

Place place_inside(const Node& text_value, std::size_t offset, std::size_t length) {
  Place place = text_value.place;
  const std::size_t quote = 1;
  const bool plain = place.length == text_value.text.size() + 2 * quote;
  if (!plain) return place;  // escapes or several lines: the value as a whole is underlined
  place.column += quote + offset;
  place.length = length;
  return place;
}

void overlay(Node& base, const Node& top) {
  for (const auto& member : top.members) {
    const auto it = std::find_if(base.members.begin(), base.members.end(),
                                 [&](const Member& m) { return m.key == member.key; });
    if (it == base.members.end()) {
      base.members.push_back(member);
    } else if (it->value.kind == Node::Kind::table && member.value.kind == Node::Kind::table) {
      overlay(it->value, member.value);
    } else {
      *it = member;
    }
  }
}

namespace {

// Places of an assignment show the argument as it was typed.
void place_in_argument(Node& node, const Place& place) {
  node.place = place;
  for (auto& item : node.items) place_in_argument(item, place);
  for (auto& member : node.members) {
    member.key_place = place;
    place_in_argument(member.value, place);
  }
}

bool keeps_its_type(const Node& node) {
  return node.kind == Node::Kind::integer || node.kind == Node::Kind::real ||
         node.kind == Node::Kind::boolean || node.kind == Node::Kind::array ||
         node.kind == Node::Kind::table;
}

std::string quoted(const std::string& value) {
  std::string text = "\"";
  for (const char c : value) {
    if (c == '"' || c == '\\') text += '\\';
    text += c;
  }
  return text + "\"";
}

}  // namespace

Outcome<Node> parse_assignment(const std::string& argument) {
  const Place place{"--set", 1, 1, argument.size(), argument};
  const std::size_t equals = argument.find('=');
  if (equals == std::string::npos || equals == 0) {
    Finding f;
    f.code = "assignment";
    f.message = "'" + argument + "' does not set a key";
    f.expected = "a key, = and a value";
    f.example = "--set contact.temperature=\"4 degC\"";
    f.place = place;
    return {{}, {f}};
  }
  const std::string key = argument.substr(0, equals);
  const std::string value = argument.substr(equals + 1);
  auto typed = parse_document(key + " = " + value + "\n", "--set");
  const auto leaf = [](const Node& document) {
    const Node* node = &document;
    while (node->kind == Node::Kind::table && node->members.size() == 1) {
      node = &node->members.front().value;
    }
    return node;
  };
  const bool table = value.find('{') != std::string::npos;
  const bool quoted_text = !value.empty() && (value.front() == '"' || value.front() == '\'');
  if (!typed || !(table || quoted_text || keeps_its_type(*leaf(*typed)))) {
    typed = parse_document(key + " = " + quoted(value) + "\n", "--set");
  }
  if (!typed) {
    for (auto& f : typed.findings) f.place = place;
    return typed;
  }
  place_in_argument(*typed.value, place);
  return typed;
}

}  // namespace capsigh
