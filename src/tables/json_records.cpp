#include "tables/json_records.hpp"

#include <algorithm>
#include <iterator>
#include <utility>

#include "tables/csv_table.hpp"
#include "tables/plain_text.hpp"

namespace isotally {

namespace {

using Json = nlohmann::ordered_json;

constexpr std::size_t max_depth = 16;

/// Counts the newlines that the parser has passed.
class LineCountingIterator {
public:
    using iterator_category = std::input_iterator_tag;
    using value_type = char;
    using difference_type = std::ptrdiff_t;
    using pointer = const char*;
    using reference = const char&;

    LineCountingIterator(const char* at, std::size_t* line) : at_(at), line_(line) {}
    reference operator*() const { return *at_; }
    LineCountingIterator& operator++() {
        if (*at_ == '\n')
            ++*line_;
        ++at_;
        return *this;
    }
    LineCountingIterator operator++(int) {
        LineCountingIterator before = *this;
        ++*this;
        return before;
    }
    bool operator==(const LineCountingIterator& other) const { return at_ == other.at_; }
    bool operator!=(const LineCountingIterator& other) const { return at_ != other.at_; }

private:
    const char* at_;
    std::size_t* line_;
};

std::string without_library_prefix(const std::string& what) {
    const std::size_t column = what.find(", column ");
    const std::size_t begin = column == std::string::npos ? what.find("] ") : what.find(": ", column);
    return begin == std::string::npos ? what : what.substr(begin + 2);
}

/// Builds the document from the parser's events (the interface that nlohmann::json::sax_parse asks
/// for) and keeps the line of every object of the outermost array.
class DocumentBuilder {
public:
    DocumentBuilder(const std::string& file, const std::size_t& line, FaultList& faults)
        : file_(file), line_(line), faults_(faults) {}

    Json document;
    std::vector<std::size_t> record_lines;
    bool clean = true;

    bool null() { return place(nullptr); }
    bool boolean(bool value) { return place(value); }
    bool number_integer(std::int64_t value) { return place(value); }
    bool number_unsigned(std::uint64_t value) { return place(value); }
    bool number_float(double value, const std::string&) { return place(value); }
    bool string(std::string& value) {
        if (value.size() > max_field_bytes)
            return stop(place_line(), "a text is longer than 64 KiB");
        return place(std::move(value));
    }
    bool binary(Json::binary_t&) { return stop(place_line(), "binary data"); }
    bool start_object(std::size_t) { return open(Json::object()); }
    bool start_array(std::size_t) { return open(Json::array()); }
    bool end_object() { return close(); }
    bool end_array() { return close(); }
    bool key(std::string& name) {
        if (name.size() > max_field_bytes)
            return stop(place_line(), "a name is longer than 64 KiB");
        if (stack_.back()->contains(name)) {
            faults_.add(file_, place_line(), "", in_quotes(name) + " stands twice in one object");
            clean = false;
        }
        key_ = std::move(name);
        return true;
    }
    bool parse_error(std::size_t, const std::string&, const nlohmann::detail::exception& error) {
        std::string message = "not valid JSON: " + without_library_prefix(error.what());
        if (stack_.size() > 1 && !record_lines.empty() && record_lines.back() != line_)
            message += " (in the record that begins on line " + std::to_string(record_lines.back()) + ")";
        return stop(line_, std::move(message));
    }

    /// Records whose last brace was read.
    std::size_t closed_records() const { return record_lines.size() - (stack_.size() > 1 ? 1 : 0); }

private:
    std::size_t place_line() const { return record_lines.empty() ? line_ : record_lines.back(); }

    bool stop(std::size_t line, std::string message) {
        faults_.add(file_, line, "", std::move(message));
        clean = false;
        return false;
    }

    Json* put(Json value) {
        if (stack_.empty()) {
            document = std::move(value);
            return &document;
        }
        Json& parent = *stack_.back();
        if (parent.is_array()) {
            if (stack_.size() == 1)
                record_lines.push_back(line_);
            parent.push_back(std::move(value));
            return &parent.back();
        }
        return &(parent[key_] = std::move(value));
    }

    bool place(Json value) {
        put(std::move(value));
        return true;
    }

    bool open(Json empty) {
        if (stack_.size() >= max_depth)
            return stop(line_, "nested deeper than 16 levels");
        stack_.push_back(put(std::move(empty)));
        return true;
    }

    bool close() {
        stack_.pop_back();
        return true;
    }

    const std::string& file_;
    const std::size_t& line_;
    FaultList& faults_;
    std::vector<Json*> stack_;
    std::string key_;
};

bool parse(std::string_view text, std::size_t& line, DocumentBuilder& builder) {
    text = without_byte_order_mark(text);
    const char* begin = text.data();
    return Json::sax_parse(LineCountingIterator(begin, &line),
                           LineCountingIterator(begin + text.size(), &line), &builder);
}

}  // namespace

JsonRecords read_json_records(const std::string& file, std::string_view text, FaultList& faults) {
    JsonRecords result;
    std::size_t line = 1;
    DocumentBuilder builder(file, line, faults);
    const bool whole = readable_text(file, text, faults) && parse(text, line, builder);
    result.complete = whole && builder.clean;
    if (whole && !builder.document.is_array()) {
        faults.add(file, 1, "", "expected an array of records, [ ... ]");
        result.complete = false;
    }
    if (!builder.document.is_array())
        return result;
    const std::size_t usable = whole ? builder.document.size() : builder.closed_records();
    for (std::size_t i = 0; i < std::min(usable, builder.document.size()); ++i) {
        if (builder.document[i].is_object()) {
            result.records.push_back({builder.record_lines[i], std::move(builder.document[i])});
        } else {
            faults.add(file, builder.record_lines[i], "", "expected a record, { ... }");
            result.complete = false;
        }
    }
    return result;
}

nlohmann::ordered_json read_json_object(const std::string& file, std::string_view text, FaultList& faults) {
    std::size_t line = 1;
    DocumentBuilder builder(file, line, faults);
    if (!readable_text(file, text, faults) || !parse(text, line, builder))
        return nullptr;
    if (builder.document.is_object())
        return std::move(builder.document);
    faults.add(file, 1, "", "expected an object, { ... }");
    return nullptr;
}

}  // namespace isotally
