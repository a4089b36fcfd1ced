// manifest.json: what a run wrote into its output folder, so that a later run can take it away.
#pragma once

#include <cstdint>
#include <filesystem>
#include <map>
#include <string>
#include <string_view>
#include <vector>

namespace tincture {

inline constexpr std::string_view manifest_name = "manifest.json";

// Whether `name` may be joined to an output folder: UTF-8, parts between single '/', none of which
// is empty or begins with a dot. So it is relative, has no "..", and names nothing hidden.
[[nodiscard]] bool is_output_name(std::string_view name);

// {"tincture": version, "command": command, "files": [{"name", "bytes"}, ...]}, sorted by name.
[[nodiscard]] std::string manifest_text(std::string_view version, std::string_view command,
                                        const std::map<std::string, std::uint64_t>& bytes_of_file);

// The names that the manifest at `path` lists, each an output name, sorted, none twice. None at all
// if there is no regular file at `path`, or it is damaged or lists a name that no run would have
// written: it may have been edited, and nobody may be led to delete something by it.
[[nodiscard]] std::vector<std::string> names_in_manifest(const std::filesystem::path& path);

}  // namespace tincture
