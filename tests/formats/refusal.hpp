// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <fmt/format.h>

#include <string>

#include "base/error.hpp"

namespace bandwright {

/// The whole message of the Error that `act` throws; a text no message equals if there is none, or
/// if its kind is another.
template <class Act>
std::string refusal(Act&& act, ErrorKind kind = ErrorKind::Input) {
  try {
    act();
  } catch (const Error& error) {
    if (error.kind() == kind) return error.what();
    return fmt::format("(error of kind {}) {}", static_cast<int>(error.kind()), error.what());
  }
  return "(no refusal)";
}

}  // namespace bandwright
