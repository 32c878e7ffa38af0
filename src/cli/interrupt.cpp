#include "interrupt.hpp"

#include <csignal>

namespace isotally::cli {
namespace {

volatile std::sig_atomic_t noted = 0;

void note(int signal) {
    noted = 1;
    std::signal(signal, SIG_DFL);
}

}  // namespace

void note_interrupts() {
    std::signal(SIGINT, note);
}

bool interrupted() {
    return noted != 0;
}

}  // namespace isotally::cli
