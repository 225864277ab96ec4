// Kind, stretch, storage, wall and limits of a container: what is wrong with them, and the case.
#pragma once

#include "capsigh/answer/bind.hpp"

namespace capsigh::answer_detail {

/// The kinds of container that records know: "can", "glass bottle", ...
std::vector<std::string> container_kinds(const Library& library);

/// Whether a course on the shelf is asked for and known: what passes the wall, and why it matters.
bool has_shelf(const ContainerSection& container);

/// Faults of these keys.
Findings check_package(const ContainerSection& container, const Library& library);

/// Binds them. `limits` are bound by the caller. The gases of the wall stand in the case's medium.
void bind_package(const ContainerSection& given, const Library& library, Binding& binding,
                  ContainerCase& container);

}  // namespace capsigh::answer_detail
