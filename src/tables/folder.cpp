#include "tables/folder.hpp"

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <system_error>

#include "tables/csv_table.hpp"

namespace isotally {

namespace fs = std::filesystem;

namespace {

std::string read_file(const fs::path& path) {
    std::error_code code;
    const auto size = fs::file_size(path, code);
    if (code)
        throw Error(ErrorKind::tables, path.string(), "can't be read: " + code.message());
    if (size > max_file_bytes)
        throw Error(ErrorKind::tables, path.string(), "the file is larger than 16 MiB");
    std::string text(static_cast<std::size_t>(size), '\0');
    std::ifstream stream(path, std::ios::binary);
    stream.read(text.data(), static_cast<std::streamsize>(text.size()));
    if (!stream)
        throw Error(ErrorKind::tables, path.string(), "can't be read");
    return text;
}

void write_file(const fs::path& path, const std::string& text) {
    const fs::path temporary = path.parent_path() / ("." + path.filename().string() + ".part");
    std::ofstream stream(temporary, std::ios::binary);
    stream.write(text.data(), static_cast<std::streamsize>(text.size()));
    stream.close();
    std::error_code code;
    if (stream)
        fs::rename(temporary, path, code);
    if (stream && !code)
        return;
    const std::string reason = code ? ": " + code.message() : "";
    fs::remove(temporary, code);
    throw Error(ErrorKind::output, path.string(), "can't be written" + reason);
}

}  // namespace

std::vector<TableFile> read_table_folder(const std::string& folder) {
    std::error_code code;
    if (!fs::is_directory(folder, code))
        throw Error(ErrorKind::tables, folder,
                    fs::exists(folder, code) ? "is not a folder, expected a folder of table files"
                                             : "there is no such folder");
    std::vector<TableFile> files;
    fs::directory_iterator entries(folder, code);
    for (; !code && entries != fs::directory_iterator(); entries.increment(code)) {
        const fs::path& path = entries->path();
        std::error_code status;
        if (!fs::is_regular_file(path, status))
            throw Error(ErrorKind::tables, path.string(),
                        "is not a file, expected only files in a tables folder");
        files.push_back({path.filename().string(), read_file(path)});
    }
    if (code)
        throw Error(ErrorKind::tables, folder, "can't be read: " + code.message());
    std::sort(files.begin(), files.end(),
              [](const TableFile& a, const TableFile& b) { return a.name < b.name; });
    return files;
}

void write_table_folder(const std::vector<TableFile>& files, const std::string& folder) {
    std::error_code code;
    fs::create_directories(folder, code);
    if (code || !fs::is_directory(folder))
        throw Error(ErrorKind::output, folder,
                    "the folder can't be created" + (code ? ": " + code.message() : ""));
    const bool empty = fs::is_empty(folder, code);
    if (code)
        throw Error(ErrorKind::output, folder, "the folder can't be read: " + code.message());
    if (!empty)
        throw Error(ErrorKind::output, folder, "the folder is not empty, expected an empty or a new one");
    for (const TableFile& file : files)
        write_file(fs::path(folder) / file.name, file.text);
}

}  // namespace isotally
