// The files of one run: staged out of sight, then put in place together or not at all.
#pragma once

#include <filesystem>
#include <functional>
#include <memory>
#include <set>
#include <string>
#include <string_view>
#include <vector>

#include "output/file_calls.h"

namespace tincture {

struct OutputPlan {
    std::filesystem::path folder;    // need not exist, nor the folders that it lies in
    std::vector<std::string> names;  // what will be written, as far as it is known yet
    // Never overwritten nor removed, under whatever path they are reached.
    std::vector<std::filesystem::path> inputs;
    std::string command;  // for the manifest, such as "reduce"
    std::string version;  // for the manifest
    bool force = false;   // overwrite, and remove what the previous manifest lists
};

// A name is relative to the folder, with '/' between its parts: "plates/01-red.tif". The name
// "manifest.json" is taken: commit() writes it. Links inside the folder are never followed: with
// force, one in the place of a file is replaced itself.
//
// Every refusal is an Error(output) whose subject is the file or folder as the user knows it. Not
// for use by several threads at a time.
class OutputSet {
  public:
    using Path = std::filesystem::path;

    // Refuses early what would be refused in the end: a folder that cannot be made or written, a
    // file that exists (without force), a folder or a device in the place of a file, an input that
    // would be overwritten or removed. Makes the staging folder: hidden, in the output folder or,
    // as long as there is none, in the nearest folder above it, so that it lies on the same file
    // system.
    explicit OutputSet(OutputPlan plan, FileCalls calls = {});

    // Removes what was staged and not committed.
    ~OutputSet();
    OutputSet(const OutputSet&) = delete;
    OutputSet& operator=(const OutputSet&) = delete;

    // Where to write the file `name` until commit(); the folder for it exists. A name that was not
    // in the plan is checked as those were.
    [[nodiscard]] Path path(const std::string& name);

    // Stages `bytes` as the new file `name`.
    void add(const std::string& name, std::string_view bytes);

    // Has `writer` write the file `name` at the path that it is given. An Error about that path
    // comes out as one about the file in the output folder.
    void write(const std::string& name, const std::function<void(const Path&)>& writer);

    // Puts every staged file and the manifest in place, once. Where the folder does not exist yet,
    // it appears whole, in one step. Where it exists, what gives way is moved aside and every step
    // is taken back if one fails. Cancelling is heeded before the first step only. Nothing can be
    // staged afterwards, whether it threw or not.
    void commit();

  private:
    class Staging;

    void check_names(std::set<std::string> names);
    void put_in_place(Staging& staging, const std::vector<std::string>& names,
                      const std::set<std::string>& give_way);

    OutputPlan plan_;
    FileCalls calls_;
    Path target_;                       // plan_.folder, absolute
    std::set<std::string> checked_;     // names that nothing stood in the way of
    std::set<std::string> wanted_;      // names that path() was asked for
    std::unique_ptr<Staging> staging_;  // null after commit()
};

}  // namespace tincture
