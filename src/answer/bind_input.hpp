// An input of a recipe with its doubt.
#pragma once

#include <cmath>
#include <string>

#include "capsigh/answer/bind.hpp"

namespace capsigh::answer_detail {

template <class Q>
Uncertain<Q> uncertain(const Given<Q>& given) {
  if (!given.plus_minus) return exactly(*given.value);
  // A limit of error is rectangular: u = a/√3 (JCGM 100, 4.3.7).
  return {*given.value, *given.plus_minus * (1.0 / std::sqrt(3.0)), Shape::rectangular, 0};
}

/// The input under its key; one without ± is listed as doubt not stated.
template <class Q>
Uncertain<Q> take(Binding& binding, const std::string& key, const Given<Q>& given) {
  auto& unstated = binding.doubt_not_stated;
  const bool listed = !unstated.empty() && unstated.back() == key;
  if (!given.plus_minus && !listed) unstated.push_back(key);
  return uncertain(given);
}

}  // namespace capsigh::answer_detail
