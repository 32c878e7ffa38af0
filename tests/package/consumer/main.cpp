#include <iostream>

#include <isotally/tables.hpp>

int main() {
    std::cout << "nearest to methil: " << isotally::nearest_word("methil", {"ethyl", "methyl", "phenyl"})
              << '\n';
}
