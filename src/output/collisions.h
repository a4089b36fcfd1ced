// What stands in the way of the files of a run, and whether it may give way. Part of OutputSet.
#pragma once

#include <filesystem>
#include <set>
#include <string>
#include <vector>

#include "output/output_set.h"

namespace tincture {

// Both throw Error(output) about `subject`: "WHAT; ADVICE", and for an errno value "WHAT: WHY;
// ADVICE".
[[noreturn]] void refuse_output(const std::filesystem::path& subject, const std::string& what);
[[noreturn]] void refuse_output(const std::filesystem::path& subject, const std::string& what,
                                int error);

enum class Entry { none, file, link, folder, other };

// What stands at `path` itself, links not followed. Throws about `subject` if nobody can tell.
[[nodiscard]] Entry entry_at(const std::filesystem::path& path,
                             const std::filesystem::path& subject);

// "a" and "a/b" for "a/b/c".
[[nodiscard]] std::vector<std::string> folders_of(const std::string& name);

// The names, below `folder`, of what has to give way to the files `names` of the plan, and with
// force to the absence of what the previous manifest lists. `folder` is plan.folder, absolute.
// Throws Error(output) if something may not or cannot give way: an input, a folder, a device, a
// link where a folder has to be, and without force any file.
[[nodiscard]] std::set<std::string> what_gives_way(const std::filesystem::path& folder,
                                                   const OutputPlan& plan,
                                                   const std::set<std::string>& names);

}  // namespace tincture
