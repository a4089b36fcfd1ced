#include "tests/support/published.h"

#include <algorithm>
#include <fstream>
#include <sstream>
#include <stdexcept>

namespace tincture::test_support {
namespace {

std::vector<std::string> fields_of(const std::string& line) {
    std::vector<std::string> fields;
    std::istringstream in(line);
    for (std::string field; std::getline(in, field, ',');) fields.push_back(field);
    return fields;
}

}  // namespace

const std::string& PublishedTable::text(std::size_t row, const std::string& column) const {
    const auto found = std::find(columns.begin(), columns.end(), column);
    if (found == columns.end()) throw std::runtime_error("no column " + column);
    return rows.at(row).at(static_cast<std::size_t>(found - columns.begin()));
}

double PublishedTable::number(std::size_t row, const std::string& column) const {
    return std::stod(text(row, column));
}

PublishedTable read_published(const std::string& file_name) {
    std::ifstream file(std::string(TINCTURE_PUBLISHED_DATA "/") + file_name);
    if (!file) throw std::runtime_error("cannot read " + file_name);
    PublishedTable table;
    for (std::string line; std::getline(file, line);) {
        if (line.empty() || line.front() == '#') continue;
        if (table.columns.empty()) {
            table.columns = fields_of(line);
        } else {
            table.rows.push_back(fields_of(line));
        }
    }
    return table;
}

}  // namespace tincture::test_support
