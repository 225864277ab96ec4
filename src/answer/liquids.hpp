// The liquid of a recipe as laws and amounts.
#pragma once

#include <functional>

#include "capsigh/answer/bind.hpp"
#include "capsigh/balance/liquid.hpp"
#include "capsigh/constants/library.hpp"
#include "capsigh/recipe/recipe.hpp"

namespace capsigh::answer_detail {

/// What binding a liquid needs from the binder: where to complain, and where to list inputs whose
/// doubt is not stated.
struct LiquidSink {
  std::function<void(Finding)> say;
  std::function<void(const std::string& key)> doubt_not_stated;
};

/// The record liquid.* of a name, or nullptr.
const Record* named_liquid(const Library& library, const std::string& name);
std::vector<std::string> liquid_names(const Library& library);

/// The relation in force: by basis and relation of the recipe, else the liquid's own default.
/// nullptr: by composition. Complains about names that do not exist.
const Record* relation_in_force(const Library& library, const LiquidSection* liquid,
                                const Record& named, const LiquidSink& sink);

/// Laws and amounts; gas constants' salting is chosen per gas elsewhere.
LiquidModel liquid_model(const Library& library, const LiquidSection* liquid, const Record& named,
                         Temperature zero_celsius, const LiquidSink& sink);

}  // namespace capsigh::answer_detail
