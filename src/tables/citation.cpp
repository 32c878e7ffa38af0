#include "tables/citation.hpp"

#include <nlohmann/json.hpp>
#include <string_view>
#include <utility>

#include "tables/plain_text.hpp"

namespace isotally {

namespace {

using Json = nlohmann::ordered_json;

std::string text_of(const Json& record, const char* field) {
    const auto found = record.find(field);
    if (found == record.end())
        return {};
    if (found->is_string())
        return std::string(trimmed(found->get_ref<const std::string&>()));
    return found->is_number() ? found->dump() : std::string{};
}

std::string family_name(const Json& person) {
    if (!person.is_object())
        return {};
    for (const char* field : {"literal", "family", "given"}) {
        std::string name = text_of(person, field);
        if (name.empty())
            continue;
        const std::string particle = text_of(person, "non-dropping-particle");
        return particle.empty() ? name : particle + " " + name;
    }
    return {};
}

std::string people(const Json& record, const char* field) {
    const auto found = record.find(field);
    if (found == record.end() || !found->is_array())
        return {};
    std::vector<std::string> names;
    for (const Json& person : *found)
        if (std::string name = family_name(person); !name.empty())
            names.push_back(std::move(name));
    if (names.empty())
        return {};
    if (names.size() > 4)
        return names[0] + " et al.";
    std::string result = names[0];
    for (std::size_t i = 1; i < names.size(); ++i)
        result += (i + 1 == names.size() ? " & " : ", ") + names[i];
    return result;
}

std::string year_of(const Json& record) {
    const auto issued = record.find("issued");
    if (issued == record.end() || !issued->is_object())
        return {};
    const Json::json_pointer first("/date-parts/0/0");
    if (issued->contains(first)) {
        const Json& year = issued->at(first);
        return year.is_string() ? year.get<std::string>() : year.is_number() ? year.dump() : std::string{};
    }
    const std::string literal = text_of(*issued, "literal");
    return literal.empty() ? text_of(*issued, "raw") : literal;
}

void append(std::string& line, const std::string& separator, const std::string& part) {
    if (part.empty())
        return;
    line += (line.empty() ? "" : separator) + part;
}

std::string one_line(std::string text) {
    for (char& c : text)
        if (static_cast<unsigned char>(c) < 0x20)
            c = ' ';
    return text;
}

}  // namespace

std::string citation_of(const std::string& csl_json) {
    const Json record = Json::parse(csl_json);
    const std::string container = text_of(record, "container-title"), title = text_of(record, "title");
    const std::string type = text_of(record, "type");
    const bool in_journal = type.starts_with("article") && !container.empty();
    std::string line = people(record, "author");
    if (line.empty())
        line = people(record, "editor");
    if (!in_journal)
        append(line, ", ", title);
    append(line, ", ", in_journal ? container : container.empty() ? "" : "in " + container);
    if (!in_journal)
        append(line, ", ", text_of(record, "publisher"));
    append(line, in_journal ? " " : ", ", year_of(record));
    append(line, ", ", text_of(record, "volume"));
    append(line, ", ", text_of(record, "page"));
    const bool only_people = title.empty() && container.empty();
    if (only_people)
        append(line, ", ", text_of(record, "note"));
    if (only_people || type == "webpage")
        append(line, ", ", text_of(record, "URL"));
    return one_line(std::move(line));
}

std::vector<CslFault> csl_faults(const std::string& csl_json) {
    const Json record = Json::parse(csl_json);
    std::vector<CslFault> faults;
    for (const char* field : {"author", "editor"}) {
        const auto found = record.find(field);
        if (found == record.end())
            continue;
        bool good = found->is_array();
        if (good)
            for (const Json& person : *found)
                good = good && !family_name(person).empty();
        if (!good)
            faults.push_back({field, "expected a list of objects with family (and given) or literal"});
    }
    if (record.contains("issued") && year_of(record).empty())
        faults.push_back({"issued", "expected {\"date-parts\": [[YEAR]]} or {\"literal\": TEXT}"});
    if (citation_of(csl_json).empty())
        faults.push_back({"title", "the record names neither people nor title, journal, note or URL"});
    return faults;
}

}  // namespace isotally
