// The MOLECULE argument: a path ending in .mol, a name, a SMILES, tried in this order.
#pragma once

#include <string>

#include "isotally/arene.hpp"
#include "isotally/factors.hpp"

namespace isotally::cli {

/// Throws Error{input} for what can't be read.
Answer<Arene> read_molecule(const Knowledge& knowledge, const std::string& text);

/// The same of a line in a list, where no path is meant.
Answer<Arene> read_listed_molecule(const Knowledge& knowledge, const std::string& text, Workspace& workspace);

/// The index of a reaction id; throws Error{usage} naming the nearest one.
int read_reaction(const Tables& tables, const std::string& id);

}  // namespace isotally::cli
