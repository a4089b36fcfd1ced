// The one error type of the library. Only main() turns it into an exit status and a line on stderr.
#pragma once

#include <stdexcept>
#include <string>

namespace tincture {

enum class ErrorKind {
    usage,      // the command line is wrong: exit status 2
    input,      // a file cannot be read or is not what it claims: exit status 1
    limit,      // a stated limit was passed, or memory ran out: exit status 1
    output,     // something cannot be written: exit status 1
    cancelled,  // the person stopped the run: ended by the signal itself
};

// what() says what is wrong and what to do, in one sentence without a final stop and without the
// name of the file; `subject` is that name as raw bytes (may be empty). Whoever prints escapes it.
class Error : public std::runtime_error {
  public:
    Error(ErrorKind kind, std::string subject, const std::string& message)
        : std::runtime_error(message), kind_(kind), subject_(std::move(subject)) {}

    [[nodiscard]] ErrorKind kind() const noexcept { return kind_; }
    [[nodiscard]] const std::string& subject() const noexcept { return subject_; }

  private:
    ErrorKind kind_;
    std::string subject_;
};

}  // namespace tincture
