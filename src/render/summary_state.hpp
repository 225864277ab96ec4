// The state of a summary as JSON, and back.
#pragma once

#include <nlohmann/json.hpp>

#include "capsigh/quality/summary.hpp"

namespace capsigh::render_detail {

nlohmann::ordered_json state_json(const Summary& summary);

}  // namespace capsigh::render_detail
