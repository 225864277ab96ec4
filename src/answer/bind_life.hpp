// Binding of [opening], [conditioning] and [supply].
#pragma once

#include <functional>

#include "bind_input.hpp"

namespace capsigh::answer_detail {

/// Works on a binding whose medium, contact and container are bound already. `index` is a gas's
/// place in the medium, `content` binds a content under a key.
class LifeBinder {
 public:
  using IndexOf = std::function<std::size_t(std::string_view)>;
  using ContentOf = std::function<ContentCase(const GivenContent&, const std::string&)>;

  LifeBinder(const Recipe& recipe, const Library& library, Binding& binding, IndexOf index,
             ContentOf content)
      : recipe_(recipe),
        library_(library),
        binding_(binding),
        index_(std::move(index)),
        content_(std::move(content)) {}

  void bind_opening();
  void bind_conditioning();
  void bind_supply();

 private:
  template <class Q>
  Uncertain<Q> take(const std::string& key, const Given<Q>& given) {
    return answer_detail::take(binding_, key, given);
  }
  void assume(std::string code, std::string message);
  void caution(std::string code, std::string message);
  void cite(std::string_view key);
  EscapeCase escape(const OpeningSection& given);
  void bind_laws_of_opening(OpeningCase& opening);
  void name_the_monohydrate(const std::string& sugar);

  const Recipe& recipe_;
  const Library& library_;
  Binding& binding_;
  IndexOf index_;
  ContentOf content_;
};

}  // namespace capsigh::answer_detail
