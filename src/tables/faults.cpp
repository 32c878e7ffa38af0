#include "tables/faults.hpp"

#include <algorithm>
#include <tuple>
#include <utility>

#include "tables/plain_text.hpp"

namespace isotally {

namespace {

constexpr std::size_t max_faults_per_file = 1000;
constexpr std::size_t max_quoted_bytes = 60;

}  // namespace

void FaultList::add(const std::string& file, std::size_t line, std::string_view field, std::string message) {
    if (++count_[file] > max_faults_per_file)
        return;
    std::string where = file;
    if (line > 0)
        where += ":" + std::to_string(line);
    if (!field.empty())
        where += ":" + std::string(field);
    faults_.push_back({file, line, {std::move(where), std::move(message)}});
}

std::vector<Fault> FaultList::take() {
    std::stable_sort(faults_.begin(), faults_.end(), [](const Located& a, const Located& b) {
        return std::tie(a.file, a.line) < std::tie(b.file, b.line);
    });
    std::vector<Fault> result;
    result.reserve(faults_.size());
    for (std::size_t i = 0; i < faults_.size(); ++i) {
        const std::string& file = faults_[i].file;
        result.push_back(std::move(faults_[i].fault));
        const bool last_of_file = i + 1 == faults_.size() || faults_[i + 1].file != file;
        if (last_of_file && count_[file] > max_faults_per_file)
            result.push_back(
                {file, std::to_string(count_[file] - max_faults_per_file) + " further faults in this file"});
    }
    faults_.clear();
    count_.clear();
    return result;
}

std::string in_quotes(std::string_view text) {
    const bool cut = text.size() > max_quoted_bytes;
    if (cut) {
        std::size_t end = max_quoted_bytes;
        while (end > 0 && (static_cast<unsigned char>(text[end]) & 0xC0u) == 0x80u)
            --end;
        text = text.substr(0, end);
    }
    const bool readable = first_invalid_utf8(text) == std::string_view::npos;
    std::string result = "\"";
    for (const char c : text) {
        const auto byte = static_cast<unsigned char>(c);
        result += byte < 0x20 || byte == 0x7f || (byte > 0x7f && !readable) ? '?' : c;
    }
    return result + (cut ? "...\"" : "\"");
}

std::string joined(const std::vector<std::string>& words) {
    std::string result;
    for (const std::string& word : words)
        result += (result.empty() ? "" : ", ") + word;
    return result;
}

std::string did_you_mean(std::string_view word, const std::vector<std::string>& known) {
    const std::string nearest = nearest_word(word, known);
    return nearest.empty() ? "" : "; did you mean " + in_quotes(nearest) + "?";
}

}  // namespace isotally
