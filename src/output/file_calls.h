// The calls to the file system that change something, in one place, so that a test can make each
// fail.
#pragma once

#include <filesystem>
#include <functional>
#include <string>
#include <string_view>

namespace tincture {

// Each returns 0, or the errno value that says why nothing was done. By default they are the
// system's.
struct FileCalls {
    using Path = std::filesystem::path;

    // Renames a file, link or folder, never onto something that exists (EEXIST).
    std::function<int(const Path& from, const Path& to)> move;
    std::function<int(const Path&)> make_folder;    // permissions: 0777 less the umask
    std::function<int(const Path&)> remove_folder;  // an empty one
    // A new file with these bytes, permissions 0666 less the umask. A write cut short and what only
    // close() reports are errors.
    std::function<int(const Path&, std::string_view bytes)> write;

    FileCalls();
};

// What an errno value means, such as "permission denied".
[[nodiscard]] std::string plain_words(int error);

}  // namespace tincture
