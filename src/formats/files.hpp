// SPDX-License-Identifier: Apache-2.0
#pragma once

#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

namespace bandwright {

/// The bytes of a file, or of standard input for "-".
/// Throws Error(Input), naming the file, if it is missing, a directory, unreadable, or larger than
/// `max_bytes`; a pipe is read until then.
[[nodiscard]] std::string read_text_file(const std::string& path, std::size_t max_bytes);

/// The files that patterns stand for, in the order of the patterns, those of one pattern in the
/// order of their bytes, each once. In a name between slashes `*` is any text, `?` one byte
/// and `[...]` one of a set; a leading dot must be written out; directories are passed over. A
/// pattern that is itself the name of a file is that file. "-" stays. Relative patterns begin at
/// `base`, a directory, which is taken literally and may be empty for the current one.
/// Throws Error(Input) that names a pattern no file matches, or a directory that cannot be read.
[[nodiscard]] std::vector<std::string> expand_paths(const std::vector<std::string>& patterns,
                                                    const std::string& base);

/// What to do about a file that is already there.
enum class Existing { Keep, Replace };

/// Writes a file whole or not at all: the bytes go to a temporary file in the same directory, are
/// flushed to the disk and then take the name, without clobbering under Existing::Keep even if
/// another process creates the file meanwhile. Under Existing::Replace the file keeps its
/// permissions, and a symbolic link to it stays a link.
/// Throws Error(Output) if the target exists (under Keep), is no regular file, or cannot be
/// written; whatever stood there still stands, and the temporary file is gone.
void write_file_atomically(const std::string& path, std::string_view bytes, Existing existing);

}  // namespace bandwright
