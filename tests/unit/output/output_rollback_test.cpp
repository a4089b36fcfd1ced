// Failing system calls, one after the other, and manifests that somebody edited.
#include <gmock/gmock.h>
#include <gtest/gtest.h>
#include <sys/stat.h>

#include <cerrno>
#include <functional>
#include <memory>
#include <new>

#include "output/manifest.h"
#include "output/output_set.h"
#include "support/error.h"
#include "temporary_folder.h"

namespace tincture {
namespace {

namespace fs = std::filesystem;
using testing::HasSubstr;
using Contents = std::map<std::string, std::string>;

// Calls of the system, of which those numbered `first` to `last` fail, counted from 0.
FileCalls failing(int first, int last, int error, const std::shared_ptr<int>& count) {
    const auto fails = [=] {
        const int now = (*count)++;
        return now >= first && now <= last;
    };
    const FileCalls system;
    FileCalls calls;
    calls.move = [=](const fs::path& from, const fs::path& to) {
        return fails() ? error : system.move(from, to);
    };
    calls.make_folder = [=](const fs::path& folder) {
        return fails() ? error : system.make_folder(folder);
    };
    calls.remove_folder = [=](const fs::path& folder) {
        return fails() ? error : system.remove_folder(folder);
    };
    calls.write = [=](const fs::path& path, std::string_view bytes) {
        return fails() ? error : system.write(path, bytes);
    };
    return calls;
}

// Writes each name with `bytes` as content.
void run(const fs::path& folder, const std::vector<std::string>& names, const std::string& bytes,
         FileCalls calls = {}) {
    OutputPlan plan;
    plan.folder = folder;
    plan.names = names;
    plan.command = "reduce";
    plan.version = "1.2.3";
    plan.force = true;
    OutputSet set(plan, std::move(calls));
    for (const std::string& name : names) set.add(name, bytes);
    set.commit();
}

const std::vector<std::string> first_run = {"a", "gone", "plates/01", "films/x/01", "swap"};
const std::vector<std::string> second_run = {"a",         "new",     "plates/01",
                                             "plates/02", "swap/in", "z/y/x"};

// Makes every call of the second run fail once, and expects that the first run's files stand.
void fail_every_call(bool folder_exists) {
    bool succeeded = false;
    for (int call = 0; !succeeded; ++call) {
        ASSERT_LT(call, 200);
        const TemporaryFolder temporary;
        const fs::path out = temporary / (folder_exists ? "out" : "up/up/out");
        if (folder_exists) {
            run(out, first_run, "first");
            put(out / "plates/note.txt", "mine");
        }
        const Contents before = contents(temporary.path());
        const auto count = std::make_shared<int>(0);
        try {
            run(out, second_run, "second", failing(call, call, ENOSPC, count));
            EXPECT_EQ(text_of(out / "plates/02"), "second");
            EXPECT_FALSE(fs::exists(out / "gone"));
            succeeded = *count <= call;  // before that, only the tidying of old folders failed
        } catch (const Error& error) {
            EXPECT_THAT(error.what(), HasSubstr("the disk is full; free some space or choose"));
            EXPECT_EQ(contents(temporary.path()), before) << "call " << call;
        }
    }
}

TEST(OutputRollback, TakesBackEveryStepInAFolderThatExists) {
    fail_every_call(true);
}

TEST(OutputRollback, TakesBackEveryStepOfANewFolder) {
    fail_every_call(false);
}

TEST(OutputRollback, TakesBackWhateverIsThrown) {
    const TemporaryFolder temporary;
    run(temporary / "out", first_run, "first");
    const Contents before = contents(temporary.path());
    FileCalls calls;
    const auto system_move = calls.move;
    calls.move = [=](const fs::path& from, const fs::path& to) {
        if (to.filename() == "new") throw std::bad_alloc();  // after "a"
        return system_move(from, to);
    };
    EXPECT_THROW(run(temporary / "out", second_run, "second", calls), std::bad_alloc);
    EXPECT_EQ(contents(temporary.path()), before);
}

TEST(OutputRollback, KeepsWhatCannotBePutBack) {
    for (int call = 0; call < 60; ++call) {
        const TemporaryFolder temporary;
        run(temporary / "out", first_run, "first");
        const auto count = std::make_shared<int>(0);
        try {
            run(temporary / "out", second_run, "second", failing(call, 1000, EIO, count));
        } catch (const Error& error) {
            std::size_t left = 0;
            for (const auto& [name, bytes] : contents(temporary.path())) left += bytes == "first";
            EXPECT_EQ(left, first_run.size()) << "call " << call;
            const bool all_back = text_of(temporary / "out/a") == "first" &&
                                  fs::exists(temporary / "out/manifest.json") &&
                                  fs::exists(temporary / "out/swap");
            if (!all_back) {
                EXPECT_THAT(error.what(), HasSubstr("the earlier files are in")) << call;
                EXPECT_THAT(error.what(), HasSubstr("/.tincture-")) << call;
            }
        }
    }
}

std::string manifest_listing(const std::string& names) {
    return R"({"tincture": "1", "command": "reduce", "files": [)" + names + "]}";
}

TEST(OutputManifest, OfAHostileHandRemovesNothing) {
    for (const char* name : {"../victim", "/VICTIM", "sub/../../victim", "./mine", "sub//mine", "",
                             ".", "..", ".git/config", "sub/", "mine\\u0000", "/"}) {
        const TemporaryFolder temporary;
        const fs::path out = temporary / "out";
        put(temporary / "victim", "mine");
        put(out / "mine", "mine");
        put(out / "sub/mine", "mine");
        put(out / ".git/config", "mine");
        std::string listed = name;
        if (listed == "/VICTIM") listed = (temporary / "victim").string();
        put(out / "manifest.json",
            manifest_listing(R"({"name": "mine"}, {"name": ")" + listed + R"("})"));
        Contents expected = contents(temporary.path());
        run(out, {"a"}, "second");
        expected["out/a"] = "second";
        expected["out/manifest.json"] = text_of(out / "manifest.json");
        EXPECT_EQ(contents(temporary.path()), expected) << name;
    }
}

TEST(OutputManifest, DoesNotLeadThroughLinksOrToFolders) {
    const TemporaryFolder temporary;
    const fs::path out = temporary / "out";
    put(temporary / "outside/victim", "mine");
    put(out / "sub/mine", "mine");
    put(out / "listed", "first");
    put(out / "deep/listed", "first");
    fs::create_directory_symlink("../outside", out / "way");
    fs::create_symlink("../outside/victim", out / "link");
    ASSERT_EQ(mkfifo((out / "pipe").c_str(), 0600), 0);
    put(out / "manifest.json",
        manifest_listing(R"({"name": "way/victim"}, {"name": "link"}, {"name": "sub"},
                            {"name": "pipe"}, {"name": "missing"}, {"name": "missing/too"},
                            {"name": "listed/below"}, {"name": "deep/listed"}, {"name": "listed"})"));
    Contents expected = contents(temporary.path());
    run(out, {"a"}, "second");
    expected.erase("out/listed");
    expected.erase("out/deep/listed");
    expected.erase("out/deep/");
    expected["out/a"] = "second";
    expected["out/manifest.json"] = text_of(out / "manifest.json");
    EXPECT_EQ(contents(temporary.path()), expected);
}

TEST(OutputManifest, IsIgnoredWhenDamaged) {
    for (const std::string& text :
         {std::string(), std::string("{"), std::string("[]"), std::string("null"),
          std::string(R"({"files": [{"name": "mine"}]})"),
          std::string(R"({"tincture": "1", "files": {"name": "mine"}})"),
          std::string(R"({"tincture": "1", "files": ["mine"]})"),
          manifest_listing(R"({"name": 1})"), manifest_listing(R"({"name": "mine"}, {})"),
          manifest_listing("{\"name\": \"mine\"}, 7"),
          manifest_listing(R"({"name": "mine"})").substr(0, 60),
          manifest_listing("{\"name\": \"mine\"}, {\"name\": \"\xff\"}"), std::string(1000000, '['),
          std::string(100, '\0'),
          manifest_listing(R"({"name": "mine"})") + std::string(20U << 20U, ' ')}) {
        const TemporaryFolder temporary;
        put(temporary / "out/mine", "mine");
        put(temporary / "out/a", "first");
        put(temporary / "out/manifest.json", text);
        run(temporary / "out", {"a"}, "second");
        EXPECT_EQ(text_of(temporary / "out/mine"), "mine") << text.substr(0, 80);
        EXPECT_EQ(text_of(temporary / "out/a"), "second");
        EXPECT_EQ(names_in_manifest(temporary / "out/manifest.json"),
                  std::vector<std::string>{"a"});
    }
}

TEST(OutputManifest, IsNotReadThroughALinkNorFromAPipe) {
    const TemporaryFolder temporary;
    put(temporary / "other.json", manifest_listing(R"({"name": "mine"})"));
    put(temporary / "out/mine", "mine");
    fs::create_symlink("../other.json", temporary / "out/manifest.json");
    run(temporary / "out", {"a"}, "second");
    EXPECT_EQ(text_of(temporary / "out/mine"), "mine");
    EXPECT_EQ(text_of(temporary / "other.json"), manifest_listing(R"({"name": "mine"})"));

    ASSERT_EQ(mkfifo((temporary / "pipe").c_str(), 0600), 0);
    EXPECT_TRUE(names_in_manifest(temporary / "pipe").empty());
    EXPECT_TRUE(names_in_manifest(temporary / "out").empty());
    EXPECT_TRUE(names_in_manifest(temporary / "missing").empty());
}

TEST(OutputManifest, ListsNamesSortedAndOnce) {
    const TemporaryFolder temporary;
    put(temporary / "m", manifest_listing(R"({"name": "b"}, {"name": "a/c"}, {"name": "b"})"));
    EXPECT_EQ(names_in_manifest(temporary / "m"), (std::vector<std::string>{"a/c", "b"}));
    const std::string text = manifest_text("1", "plates", {{"b\"\n", 7}, {"a/ä", 4294967296}});
    put(temporary / "n", text);
    EXPECT_EQ(names_in_manifest(temporary / "n"), (std::vector<std::string>{"a/ä", "b\"\n"}));
    EXPECT_THAT(text, HasSubstr("4294967296"));
}

}  // namespace
}  // namespace tincture
