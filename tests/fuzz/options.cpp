// The command line: one word a line, read and not done.
#include <sstream>
#include <vector>

#include "cli/command_line.hpp"
#include "input.hpp"

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
    using namespace isotally;
    std::vector<std::string> words{"isotally"};
    std::istringstream lines(fuzz::text_of(data, size));
    for (std::string line; std::getline(lines, line);) {
        words.push_back(line.substr(0, line.find('\0')));
    }
    std::vector<char*> arguments;
    for (auto& word : words)
        arguments.push_back(word.data());
    std::istringstream in("Cc1ccccc1\n");
    std::ostringstream out, err;
    const int status =
        cli::command_line(static_cast<int>(arguments.size()), arguments.data(), in, out, err, false);
    fuzz::require(status == 0 || status == 2);
    fuzz::require(status == 0 || !err.str().empty());
    return 0;
}
