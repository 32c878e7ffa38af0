#include "step_list.hpp"

#include <fmt/format.h>

#include <condition_variable>
#include <deque>
#include <istream>
#include <memory>
#include <mutex>
#include <ostream>
#include <thread>
#include <vector>

#include "interrupt.hpp"
#include "isotally/report.hpp"
#include "list_lines.hpp"
#include "molecule_argument.hpp"
#include "progress.hpp"
#include "status.hpp"

namespace isotally::cli {
namespace {

constexpr std::size_t lines_in_block = 32;
constexpr std::size_t blocks_for_each_thread = 4;

struct Block {
    std::vector<ListLine> lines;
    std::string answers, sentences;
    bool done = false;
};

/// Throws Error for a line that can't be read.
Answer<StepAnswer> answer_molecule(const Knowledge& knowledge, StepWorker& worker, const ListLine& line) {
    if (line.too_long)
        throw Error(ErrorKind::input, "line",
                    fmt::format("more than {} characters, a SMILES of at most 1,000 and a name are read",
                                longest_line));
    const auto arene = read_listed_molecule(knowledge, line.molecule, *worker.workspace);
    if (const auto* refused = refusal(arene))
        return *refused;
    return answer_step(worker, std::get<Arene>(arene));
}

/// Appends the answer to one line; a failure is an answer of its own and a sentence.
void answer_line(const Knowledge& knowledge, StepWorker& worker, const ListLine& line, Block& block) {
    const auto failed = [&](Status status, const std::string& kind, const std::string& where,
                            const std::string& message) {
        block.sentences += fmt::format("isotally: line {}: {}\n", line.number, message);
        // without the number of the line: a part of a list answers as the whole does
        block.answers += error_json(static_cast<int>(status), kind, where, message, line.label);
    };
    try {
        const auto step = answer_molecule(knowledge, worker, line);
        if (const auto* refused = refusal(step))
            failed(Status::refused, "refused", refused->where, refused->reason);
        else
            append_step_json(knowledge.tables, std::get<StepAnswer>(step), worker.draws, line.label,
                             block.answers);
    } catch (const Error& e) {
        failed(status_of(e.kind), kind_name(e.kind), e.where, e.what());
    } catch (const std::exception& e) {
        failed(Status::defect, "defect", "isotally", e.what());
    }
    block.answers += '\n';
}

void answer_block(const Knowledge& knowledge, StepWorker& worker, Block& block) {
    for (const auto& line : block.lines)
        answer_line(knowledge, worker, line, block);
}

/// Blocks in work: taken by any worker, given back in order.
class Conveyor {
public:
    Conveyor(const Knowledge& knowledge, const std::shared_ptr<const FamilyModel>& model,
             const Conditions& conditions, const Draws& draws, unsigned threads) {
        for (unsigned i = 0; i < threads; ++i)
            workers_.emplace_back([this, &knowledge, model, conditions, draws] {
                auto worker = step_worker(knowledge, model, conditions, draws);
                while (auto* block = take()) {
                    answer_block(knowledge, worker, *block);
                    const std::lock_guard lock(mutex_);
                    block->done = true;
                    changed_.notify_all();
                }
            });
    }
    ~Conveyor() {
        {
            const std::lock_guard lock(mutex_);
            closed_ = true;
            changed_.notify_all();
        }
        for (auto& worker : workers_)
            worker.join();
    }
    Conveyor(const Conveyor&) = delete;
    Conveyor& operator=(const Conveyor&) = delete;

    std::size_t size() const { return blocks_.size(); }

    void put(Block block) {
        const std::lock_guard lock(mutex_);
        blocks_.push_back(std::make_unique<Block>(std::move(block)));
        changed_.notify_all();
    }

    Block first() {
        std::unique_lock lock(mutex_);
        changed_.wait(lock, [&] { return blocks_.front()->done; });
        Block block = std::move(*blocks_.front());
        blocks_.pop_front();
        --next_;
        return block;
    }

private:
    Block* take() {
        std::unique_lock lock(mutex_);
        changed_.wait(lock, [&] { return closed_ || next_ < blocks_.size(); });
        return next_ < blocks_.size() ? blocks_[next_++].get() : nullptr;
    }

    std::mutex mutex_;
    std::condition_variable changed_;
    std::deque<std::unique_ptr<Block>> blocks_;
    std::size_t next_ = 0;  // first block that nobody has taken
    bool closed_ = false;
    std::vector<std::thread> workers_;
};

/// As many lines as are there without waiting for more, up to a block.
void fill(Block& block, std::istream& in, std::size_t& lines_read) {
    block.lines.clear();
    block.answers.clear();
    block.sentences.clear();
    do {
        auto line = next_line(in, lines_read);
        if (!line)
            break;
        block.lines.push_back(std::move(*line));
    } while (block.lines.size() < lines_in_block && in.rdbuf()->in_avail() > 0);
}

}  // namespace

int step_list(const StepRequest& request, const Knowledge& knowledge, const Conditions& conditions,
              std::istream& in, std::ostream& out, std::ostream& err) {
    const auto& family = knowledge.tables.reactions[static_cast<std::size_t>(conditions.reaction)].family;
    const auto model = fit_family(knowledge, family);
    const unsigned threads =
        request.threads > 0 ? request.threads : std::max(1u, std::thread::hardware_concurrency());
    std::size_t lines_read = 0, answered = 0;
    for (std::size_t passed = 0; passed < request.skip; ++passed)
        if (!next_line(in, lines_read))
            break;
    Progress progress(err, request.quiet, "lines answered");
    const auto write = [&](const Block& block) {
        progress.clear();
        err << block.sentences;
        out.write(block.answers.data(), static_cast<std::streamsize>(block.answers.size())).flush();
        progress.show(answered += block.lines.size());
    };
    const auto wanted = [&] { return out && !interrupted(); };
    if (threads == 1) {
        auto worker = step_worker(knowledge, model, conditions, request.draws);
        Block block;
        while (wanted()) {
            fill(block, in, lines_read);
            if (block.lines.empty())
                break;
            answer_block(knowledge, worker, block);
            write(block);
        }
    } else {
        Conveyor conveyor(knowledge, model, conditions, request.draws, threads);
        for (bool more = true; more || conveyor.size() > 0;) {
            more = more && wanted();
            const bool room = conveyor.size() < blocks_for_each_thread * threads;
            if (more && room && (conveyor.size() == 0 || in.rdbuf()->in_avail() > 0)) {
                Block block;
                fill(block, in, lines_read);
                more = !block.lines.empty();
                if (more)
                    conveyor.put(std::move(block));
            } else if (conveyor.size() > 0) {
                write(conveyor.first());
            }
        }
    }
    progress.clear();
    if (!interrupted())
        return 0;
    err << fmt::format("isotally: interrupted after {} lines; --skip {} goes on from there\n", answered,
                       request.skip + answered);
    return static_cast<int>(Status::interrupted);
}

}  // namespace isotally::cli
