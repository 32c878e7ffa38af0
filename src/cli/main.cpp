#include <csignal>
#include <iostream>

#include "command_line.hpp"
#include "interrupt.hpp"

int main(int argc, char** argv) {
    std::ios::sync_with_stdio(false);
    std::signal(SIGPIPE, SIG_DFL);  // a reader that goes away ends the program, even if the parent ignores it
    isotally::cli::note_interrupts();
    return isotally::cli::command_line(argc, argv, std::cin, std::cout, std::cerr);
}
