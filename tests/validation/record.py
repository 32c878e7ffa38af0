"""Compares the scores of the program with those committed in validation/, or records them anew.

record.py [--rewrite] --program PATH

validation/scores.json holds the scores of `isotally check --all`. Each folder of validation/ that has a family.json
holds records of a family that teaches nothing: it is put into a copy of the tables with its family's prior only,
every record is asked of `isotally step`, and the scores stand in scores.json beside it. The rates of the
polymethylbenzenes are asked with all of them left out. A score that got worse or better fails until it is recorded.
"""

import argparse
import csv
import json
import re
import shutil
import subprocess
import sys
import tempfile
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
VALIDATION = ROOT / "validation"
FIGURES = ("mean_absolute_error_points", "leading_isomer_right", "coverage_90", "mean_width_points", "log_score")


def ask(program, *words):
    return json.loads(subprocess.run([program, *words], check=True, capture_output=True, text=True).stdout)


def rounded(value):
    return float(f"{value:.6g}")


def scores_of_sets(program):
    answer = ask(program, "check", "--all", "--json")
    return {
        entry["name"]: {"records": entry["records"], **{name: rounded(entry[name]) for name in FIGURES},
                        **{f"{name}_range": [rounded(x) for x in entry[f"{name}_range"]] for name in FIGURES}}
        for entry in answer["sets"] + [answer["total"]]
    }


def append_rows(path, rows):
    columns = path.read_text(encoding="utf-8").splitlines()[0].split(",")
    with path.open("a", encoding="utf-8", newline="") as file:
        csv.DictWriter(file, columns, restval="", lineterminator="\n").writerows(rows)


def scores_by_correlation(program, folder):
    family = json.loads((folder / "family.json").read_text(encoding="utf-8"))
    records = json.loads((folder / "records.json").read_text(encoding="utf-8"))
    errors, inside, widths, leaders = [], [], [], []
    with tempfile.TemporaryDirectory() as temporary:
        tables = Path(temporary) / "tables"
        shutil.copytree(ROOT / "tables", tables)
        append_rows(tables / "reactions.csv", [family["reaction"]])
        append_rows(tables / "model.csv", family["model"])
        for record in records:
            answer = ask(program, "step", record["substrate"], "--reaction", family["reaction"]["id"], "--json",
                         "--tables", str(tables))
            found = {site["product"]["smiles"]: site for site in answer["sites"]}
            observed = {product["smiles"]: product["percent"] for product in record["products"]}
            assert set(observed) <= set(found), record["id"]
            leaders.append(max(observed, key=observed.get) == answer["sites"][0]["product"]["smiles"])
            for smiles, site in found.items():
                seen = observed.get(smiles, 0)
                if not record["complete"] and smiles not in observed or max(seen, site["percent"]) <= 1:
                    continue
                errors.append(abs(seen - site["percent"]))
                inside.append(site["percent_low"] <= seen <= site["percent_high"])
                widths.append(site["percent_high"] - site["percent_low"])
    mean = lambda values: rounded(sum(values) / len(values))
    return {"records": len(records), "mean_absolute_error_points": mean(errors), "leading_isomer_right": mean(leaders),
            "coverage_90": mean(inside), "mean_width_points": mean(widths)}


def polymethylbenzene_rates(program):
    """Predicted over observed rate in bromination, the rates of all polymethylbenzenes left out."""
    ratios = {}
    with tempfile.TemporaryDirectory() as temporary:
        tables = Path(temporary) / "tables"
        shutil.copytree(ROOT / "tables", tables)
        path = tables / "rates.csv"
        with path.open(encoding="utf-8", newline="") as file:
            rows = list(csv.DictReader(file))
        left_out = [row for row in rows if row["reaction"] == "bromination-acetic-acid" and row["use"] == "yes"
                    and re.fullmatch(r"[Cc1()]+", row["substrate"]) and row["substrate"].count("C") > 1
                    and row["id"].startswith("P")]
        for row in left_out:
            row["use"], row["use_reason"] = "no", "left out here"
        with path.open("w", encoding="utf-8", newline="") as file:
            writer = csv.DictWriter(file, rows[0].keys(), lineterminator="\n")
            writer.writeheader()
            writer.writerows(rows)
        for row in left_out:
            answer = ask(program, "step", row["substrate"], "--reaction", row["reaction"], "--json", "--tables",
                         str(tables))
            ratios[row["id"]] = {"substrate": row["substrate"], "observed": float(row["value"]),
                                 "predicted_over_observed":
                                     rounded(answer["relative_rate"]["value"] / float(row["value"]))}
    within = sum(0.5 <= entry["predicted_over_observed"] <= 2 for entry in ratios.values())
    return {"records": len(ratios), "within_a_factor_of_two": within, "rates": ratios}


def score_table(scores):
    """The table of validation/README.md, from the scores of `isotally check --all`."""
    digits = (1, 2, 2, 1, 2)
    lines = ["| set | records | mean error, points | leading isomer right | 90 % interval holds | mean width, points | "
             "log score |", "|---|---|---|---|---|---|---|"]
    for name, entry in scores.items():
        if name.endswith("-partial") or entry["records"] < 5:
            continue
        cells = [f"{entry[figure]:.{n}f} [{entry[f'{figure}_range'][0]:.{n}f}, {entry[f'{figure}_range'][1]:.{n}f}]"
                 for figure, n in zip(FIGURES, digits)]
        lines.append(f"| {name} | {entry['records']} | {' | '.join(cells)} |")
    return "\n".join(lines) + "\n"


def with_score_table(text, scores):
    return re.sub(r"\| set \| records \|.*?\n(?=\n)", lambda _: score_table(scores), text, count=1, flags=re.S)


def differences(wanted, found, path=""):
    if isinstance(wanted, dict) and isinstance(found, dict):
        for key in sorted(wanted.keys() | found.keys()):
            yield from differences(wanted.get(key), found.get(key), f"{path}/{key}")
    elif isinstance(wanted, list) and isinstance(found, list) and len(wanted) == len(found):
        for index, (a, b) in enumerate(zip(wanted, found)):
            yield from differences(a, b, f"{path}/{index}")
    elif isinstance(wanted, (int, float)) and isinstance(found, (int, float)):
        if abs(wanted - found) > 2e-5 * max(1, abs(wanted)):
            yield f"{path}: recorded {wanted}, now {found}"
    elif wanted != found:
        yield f"{path}: recorded {wanted}, now {found}"


def main():
    parser = argparse.ArgumentParser()
    parser.add_argument("--rewrite", action="store_true")
    parser.add_argument("--program", required=True)
    arguments = parser.parse_args()
    program = str(Path(arguments.program).resolve())
    now = {VALIDATION / "scores.json": scores_of_sets(program)}
    for folder in sorted(path.parent for path in VALIDATION.glob("*/family.json")):
        now[folder / "scores.json"] = scores_by_correlation(program, folder)
    now[VALIDATION / "polymethylbenzene-rates" / "scores.json"] = polymethylbenzene_rates(program)
    failed = False
    page = VALIDATION / "README.md"
    text = page.read_text(encoding="utf-8")
    wanted = with_score_table(text, now[VALIDATION / "scores.json"])
    if arguments.rewrite:
        page.write_text(wanted, encoding="utf-8")
    elif wanted != text:
        print("validation/README.md: its table is not that of the scores")
        failed = True
    for path, scores in now.items():
        if arguments.rewrite:
            path.write_text(json.dumps(scores, indent=1) + "\n", encoding="utf-8")
            continue
        for line in differences(json.loads(path.read_text(encoding="utf-8")), scores, str(path.relative_to(ROOT))):
            print(line)
            failed = True
    if failed:
        sys.exit("scores moved: look why, then record them with record.py --rewrite")


if __name__ == "__main__":
    main()
