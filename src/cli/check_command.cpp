#include "check_command.hpp"

#include <algorithm>
#include <ostream>

#include "isotally/check.hpp"
#include "isotally/report.hpp"
#include "output_file.hpp"
#include "status.hpp"

namespace isotally::cli {
int check_command(const CheckRequest& request, const Knowledge& knowledge, std::ostream& out) {
    const auto families = families_of(knowledge.tables);
    auto wanted = request.sets;
    if (request.all)
        wanted = families;
    if (wanted.empty())
        wanted = {"nitration"};
    std::vector<CheckSet> chosen;
    for (const auto& family : families) {
        const bool whole = std::find(wanted.begin(), wanted.end(), family) != wanted.end();
        const bool some = std::any_of(wanted.begin(), wanted.end(), [&](const std::string& word) {
            return word.starts_with(family + "-");
        });
        if (!whole && !some)
            continue;
        for (auto& set : check_sets(knowledge.tables, check_family(knowledge, family, request.draws)))
            if (whole || std::find(wanted.begin(), wanted.end(), set.name) != wanted.end())
                chosen.push_back(std::move(set));
    }
    for (const auto& word : wanted) {
        const auto known = [&](const std::string& name) {
            return name == word || name.starts_with(word + "-");
        };
        if (std::find(families.begin(), families.end(), word) == families.end() &&
            std::none_of(chosen.begin(), chosen.end(),
                         [&](const CheckSet& set) { return known(set.name); })) {
            const auto nearest = nearest_word(word, families);
            throw Error(ErrorKind::usage, "argument SET",
                        "there is no set \"" + printable(word) + "\"" +
                            (nearest.empty() ? "" : " (is " + nearest + " meant?)") +
                            "; sets are families of reactions or names such as nitration-poly");
        }
    }
    if (!request.svg_file.empty())
        write_file(request.svg_file, check_svg(chosen));
    if (request.json)
        out << check_json(knowledge.tables, chosen) << '\n';
    else if (request.csv)
        out << check_csv(chosen);
    else
        out << check_text(knowledge.tables, chosen);
    return 0;
}

}  // namespace isotally::cli
