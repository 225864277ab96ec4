#include <catch2/catch.hpp>

#include "capsigh/document/document.hpp"
#include "support.hpp"

using namespace capsigh;
using namespace capsigh::test;

namespace {

std::string refusal(const std::string& text) {
  const auto document = parse_document(text, "t.toml");
  REQUIRE_FALSE(document);
  REQUIRE(document.findings.size() == 1);
  return document.findings.front().code;
}

}  // namespace

TEST_CASE("values and keys keep their places") {
  const auto document = parse_document(
      "title = \"x\"\n[contact]\n  temperature = \"4 degC\"\ndissolved = { CO2 = \"3 vol\" }\n",
      "t.toml");
  REQUIRE(document);
  const auto* contact = document->find("contact");
  REQUIRE(contact != nullptr);
  CHECK(contact->key_place.line == 2);
  CHECK(contact->key_place.column == 2);
  const auto* temperature = contact->value.find("temperature");
  REQUIRE(temperature != nullptr);
  CHECK(temperature->key_place.line == 3);
  CHECK(temperature->key_place.column == 3);
  CHECK(temperature->value.place.column == 17);
  const auto inside = place_inside(temperature->value, 2, 4);
  CHECK(inside.column == 20);
  CHECK(inside.length == 4);
  const auto* dissolved = contact->value.find("dissolved");
  REQUIRE(dissolved != nullptr);
  CHECK(dissolved->key_place.column == 1);
  REQUIRE(dissolved->value.find("CO2") != nullptr);
  CHECK(dissolved->value.find("CO2")->key_place.column == 15);
}

TEST_CASE("members keep the order of the text") {
  const auto document = parse_document("z = 1\na = 2\nm = 3.5\n", "t.toml");
  REQUIRE(document);
  REQUIRE(document->members.size() == 3);
  CHECK(document->members[0].key == "z");
  CHECK(document->members[2].key == "m");
  CHECK(document->members[0].value.kind == Node::Kind::integer);
  CHECK(document->members[2].value.kind == Node::Kind::real);
}

TEST_CASE("BOM and CRLF read like any other file") {
  const auto document = parse_document("\xEF\xBB\xBFtitle = \"x\"\r\n[gas]\r\n", "t.toml");
  REQUIRE(document);
  CHECK(document->find("title")->value.text == "x");
  CHECK(document->find("gas")->key_place.line == 2);
}

TEST_CASE("bytes that would harm the parser never reach it") {
  CHECK(refusal("a = \"\xC3") == "not-utf8");
  CHECK(refusal("\xC3") == "not-utf8");
  CHECK(refusal("a = \"\xED\xA0\x80\"") == "not-utf8");  // a surrogate
  CHECK(refusal(std::string("a = \"\0\"", 7)) == "not-text");
  CHECK(refusal(std::string(70000, '#')) == "too-long");
  std::string brackets = "a = ";
  for (int i = 0; i < 20000; ++i) brackets += i % 100 == 99 ? "[\n" : "[";
  CHECK(refusal(brackets) == "too-deep");
  CHECK(refusal("a = \"" + std::string(5000, 'x') + "\"") == "line-too-long");
  std::string dotted = "a";
  for (int i = 0; i < 1000; ++i) dotted += ".a";
  CHECK(refusal(dotted + " = 1") == "too-deep");
  // Quotes and comments must not hide brackets.
  CHECK(refusal("a = \"\"\" x \"\"\"\nb = " + std::string(100, '[')) == "too-deep");
  CHECK(refusal("a = [\n# ]]]]]]\n" + std::string(100, '[')) == "too-deep");
}

TEST_CASE("brackets in texts and comments are no depth") {
  const std::string many(100, '[');
  CHECK(parse_document("a = \"" + many + "\" # " + many + "\nb = '" + many + "'\n", "t.toml"));
}

TEST_CASE("a syntax error is one finding with its place") {
  const auto document = parse_document("[contact]\ntemperature = 4 degC\n", "t.toml");
  REQUIRE_FALSE(document);
  REQUIRE(document.findings.size() == 1);
  CHECK(document.findings[0].code == "toml-syntax");
  CHECK(document.findings[0].place->line == 2);
  CHECK(document.findings[0].place->column == 17);
}
