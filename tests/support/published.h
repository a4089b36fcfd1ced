// Published numbers: the tables in tests/published-data.
#pragma once

#include <string>
#include <vector>

namespace tincture::test_support {

struct PublishedTable {
    std::vector<std::string> columns;
    std::vector<std::vector<std::string>> rows;

    [[nodiscard]] const std::string& text(std::size_t row, const std::string& column) const;
    [[nodiscard]] double number(std::size_t row, const std::string& column) const;
};

// Lines that start with # are left out; throws std::runtime_error where the file is missing.
[[nodiscard]] PublishedTable read_published(const std::string& file_name);

}  // namespace tincture::test_support
