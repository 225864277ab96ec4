// A TOML text as located values: the only room that knows the TOML library. Every value and every
// key keeps its place, so that later rooms can point at what they do not like.
#pragma once

#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

#include "capsigh/quantity/finding.hpp"

namespace capsigh {

struct Member;

/// One TOML value. `kind` says which of the fields holds it; members keep the order of the text.
struct Node {
  enum class Kind { text, integer, real, boolean, array, table, other };
  Kind kind = Kind::other;
  std::string text;
  std::int64_t integer = 0;
  double real = 0;
  bool boolean = false;
  std::vector<Node> items;
  std::vector<Member> members;
  Place place;

  [[nodiscard]] const Member* find(std::string_view key) const;
};

struct Member {
  std::string key;
  Place key_place;
  Node value;
};

/// "a text", "a whole number"...: what the value is, for messages.
std::string_view kind_name(Node::Kind kind);

struct DocumentLimits {
  std::size_t bytes = std::size_t{64} * 1024;
  std::size_t depth = 64;
  std::size_t line = 4096;
};

/// Parses a TOML text (a BOM and CRLF line ends are accepted). On failure one finding says where
/// and why: not text, too long, too deep, or the first syntax error. Never throws, on any bytes.
Outcome<Node> parse_document(std::string_view text, const std::string& file,
                             const DocumentLimits& limits = {});

/// Lays `top` over `base`: tables are joined key by key, everything else of `top` replaces.
void overlay(Node& base, const Node& top);

/// Reads one "a.b.c=value" of a command line as a document. The value is text unless it reads as a
/// TOML number, boolean, array or table. Places point into the argument.
Outcome<Node> parse_assignment(const std::string& argument);

/// Whether the bytes are UTF-8 throughout (RFC 3629).
bool is_utf8(std::string_view text);

/// The place inside a text value: `offset` and `length` count bytes from its first character.
Place place_inside(const Node& text_value, std::size_t offset, std::size_t length);

}  // namespace capsigh
