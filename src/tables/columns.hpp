// What the files of a tables folder hold: the one description that reading, the command line and
// datapackage.json go by.
#pragma once

#include <limits>
#include <string>
#include <string_view>
#include <vector>

namespace isotally {

enum class FieldType {
    id,    // printable ASCII without blanks
    word,  // one of Column::words
    text,
    number,
    integer,
    flag,  // yes or no; true or false in JSON
    smiles,
    smarts,
    reference,   // an id of the file Column::refers
    references,  // ids or families of reactions.csv separated by blanks, or *
    group,       // a substituent id, kind:KIND or principal:GROUP
    parts,       // a list of objects (JSON only), see FileSchema::part
};

struct Column {
    std::string name;
    FieldType type = FieldType::text;
    std::string description;
    bool required = false;
    std::string unit = {};
    double minimum = -std::numeric_limits<double>::infinity();
    double maximum = std::numeric_limits<double>::infinity();
    bool positive = false;  // over zero, zero excluded
    std::vector<std::string> words = {};
    std::string refers = {};
    bool may_be_missing = false;  // the column as a whole
};

struct FileSchema {
    std::string file;                            // "constants.csv"
    std::string kind;                            // "constants"; what `isotally tables` calls it
    std::string holds;                           // one line
    std::vector<std::vector<std::string>> keys;  // columns that together stand once
    std::vector<Column> columns;
    std::vector<Column> part = {};  // of the objects in a field of type parts
    bool open = false;              // further fields are allowed (CSL)
    bool listed = true;             // a kind of its own on the command line
};

/// In the order in which people meet them.
const std::vector<FileSchema>& file_schemas();

const FileSchema* schema_of_file(std::string_view file);
const FileSchema* schema_of_kind(std::string_view kind);
const Column* find_column(const std::vector<Column>& columns, std::string_view name);
std::vector<std::string> column_names(const std::vector<Column>& columns);

/// "a number from 0 to 100 (percent)", for messages.
std::string expected_text(const Column& column);

/// datapackage.json (Data Package) as these descriptions say it.
std::string datapackage_text(const std::string& version);

}  // namespace isotally
