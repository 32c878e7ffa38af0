// Runs the program as a process and gives back all it said.
#pragma once

#include <fcntl.h>
#include <poll.h>
#include <sys/wait.h>
#include <unistd.h>

#include <array>
#include <chrono>
#include <csignal>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <stdexcept>
#include <string>
#include <utility>
#include <vector>

namespace isotally::cli_test {

struct Finished {
    int exit = -1;  // -1: ended by a signal
    int signal = 0;
    bool in_time = true;
    std::string out, err;
};

struct Setting {
    std::string input = {};                                             // standard input
    std::vector<std::pair<std::string, std::string>> environment = {};  // set beside what stands
    std::string out_file = {};                                          // standard output, instead of a pipe
    bool reader_leaves = false;   // closes standard output after the first bytes
    bool ignore_sigpipe = false;  // as some parents leave it
    std::chrono::seconds limit{60};
};

namespace detail {

inline std::array<int, 2> new_pipe() {
    std::array<int, 2> ends{};
    if (pipe2(ends.data(), O_CLOEXEC) != 0)
        throw std::runtime_error("pipe2");
    return ends;
}

[[noreturn]] inline void become(const std::vector<std::string>& words, const Setting& setting, int in,
                                int out, int err) {
    dup2(in, STDIN_FILENO);
    dup2(setting.out_file.empty() ? out : open(setting.out_file.c_str(), O_WRONLY), STDOUT_FILENO);
    dup2(err, STDERR_FILENO);
    std::signal(SIGPIPE, setting.ignore_sigpipe ? SIG_IGN : SIG_DFL);
    for (const auto& [name, value] : setting.environment)
        setenv(name.c_str(), value.c_str(), 1);
    std::vector<char*> argv;
    for (const auto& word : words)
        argv.push_back(const_cast<char*>(word.c_str()));
    argv.push_back(nullptr);
    execv(argv[0], argv.data());
    _exit(127);
}

inline void close_end(int& end) {
    if (end >= 0)
        close(end);
    end = -1;
}

/// False at the end of what comes.
inline bool read_some(int from, std::string& into) {
    char buffer[65536];
    const auto count = read(from, buffer, sizeof buffer);
    if (count > 0)
        into.append(buffer, static_cast<std::size_t>(count));
    return count > 0;
}

}  // namespace detail

inline Finished run(const std::vector<std::string>& arguments, const Setting& setting = {}) {
    std::signal(SIGPIPE, SIG_IGN);
    std::vector<std::string> words{ISOTALLY_PROGRAM};
    words.insert(words.end(), arguments.begin(), arguments.end());
    auto in = detail::new_pipe(), out = detail::new_pipe(), err = detail::new_pipe();
    const pid_t child = fork();
    if (child == 0)
        detail::become(words, setting, in[0], out[1], err[1]);
    for (int* end : {&in[0], &out[1], &err[1]})
        detail::close_end(*end);
    fcntl(in[1], F_SETFL, O_NONBLOCK);
    Finished finished;
    std::size_t sent = 0;
    const auto deadline = std::chrono::steady_clock::now() + setting.limit;
    while (out[0] >= 0 || err[0] >= 0) {
        if (in[1] >= 0 && sent == setting.input.size())
            detail::close_end(in[1]);
        pollfd watched[] = {{in[1], POLLOUT, 0}, {out[0], POLLIN, 0}, {err[0], POLLIN, 0}};
        poll(watched, 3, 100);
        if (std::chrono::steady_clock::now() > deadline) {
            finished.in_time = false;
            kill(child, SIGKILL);
            break;
        }
        if (watched[0].revents != 0) {
            const auto count = write(in[1], setting.input.data() + sent, setting.input.size() - sent);
            if (count > 0)
                sent += static_cast<std::size_t>(count);
            else
                detail::close_end(in[1]);
        }
        if (watched[1].revents != 0 && (!detail::read_some(out[0], finished.out) || setting.reader_leaves))
            detail::close_end(out[0]);
        if (watched[2].revents != 0 && !detail::read_some(err[0], finished.err))
            detail::close_end(err[0]);
    }
    for (int* end : {&in[1], &out[0], &err[0]})
        detail::close_end(*end);
    int status = 0;
    waitpid(child, &status, 0);
    if (WIFEXITED(status))
        finished.exit = WEXITSTATUS(status);
    else
        finished.signal = WTERMSIG(status);
    return finished;
}

/// A folder of its own that goes when the test ends.
class Folder {
public:
    Folder() {
        std::string name = (std::filesystem::temp_directory_path() / "isotally-cli-XXXXXX").string();
        if (mkdtemp(name.data()) == nullptr)
            throw std::runtime_error("mkdtemp");
        path_ = name;
    }
    ~Folder() {
        std::error_code ignored;
        std::filesystem::remove_all(path_, ignored);
    }
    Folder(const Folder&) = delete;
    Folder& operator=(const Folder&) = delete;

    std::string operator/(const std::string& name) const { return (path_ / name).string(); }

    std::string write(const std::string& name, const std::string& text) const {
        std::ofstream(path_ / name, std::ios::binary) << text;
        return *this / name;
    }

private:
    std::filesystem::path path_;
};

inline std::string read_file(const std::string& path) {
    std::ifstream in(path, std::ios::binary);
    return {(std::istreambuf_iterator<char>(in)), {}};
}

}  // namespace isotally::cli_test
