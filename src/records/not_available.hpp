// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <array>
#include <span>
#include <string_view>

namespace bandwright {

/// A part of the plan grammar that is known but not computed by this version. A plan that uses it is
/// refused by name: ignoring it would give another model than the one asked for.
struct NotAvailable {
  std::array<std::string_view, 2> tables;  ///< "regression"; "" = the top level; "step" = a step
  std::string_view key;
  std::string_view word;    ///< a value of the key; empty = the key itself, with any value
  std::string_view remedy;  ///< what to do instead; empty = use one of the words that are available
};

/// The whole list. Whoever builds a part deletes its line here.
[[nodiscard]] std::span<const NotAvailable> not_available_list();

/// The entry of a key (or, with `word`, of a value of that key) in a table; null if there is none.
[[nodiscard]] const NotAvailable* find_not_available(std::string_view table, std::string_view key,
                                                     std::string_view word = {});

}  // namespace bandwright
