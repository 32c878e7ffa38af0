// Ctrl-C: the work in hand is finished and what is known so far is printed.
#pragma once

namespace isotally::cli {

/// From here on an interrupt is noted; a second one ends the program at once.
void note_interrupts();

bool interrupted();

}  // namespace isotally::cli
