// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <string>

#include "base/error.hpp"

namespace bandwright {

/// The one line of the Error that `call` throws, for comparison as a whole; says so when nothing or
/// something else was thrown, or the kind differs.
template <class Call>
[[nodiscard]] std::string error_text(ErrorKind kind, Call&& call) {
  try {
    call();
  } catch (const Error& error) {
    return error.kind() == kind ? error.what() : "another kind of error: " + std::string(error.what());
  } catch (const std::exception& error) {
    return "no Error, but: " + std::string(error.what());
  }
  return "nothing was thrown";
}

}  // namespace bandwright
