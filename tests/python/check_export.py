"""Files of ranked cells, read by pyarrow and held against the service's ranking."""

import csv
import json
import subprocess

import pyarrow as pa
import pyarrow.ipc
import pyarrow.parquet
import pytest

from test_client import chemistry, done, jobs, pages  # noqa: F401: fixtures

NAMES = ["rank", "cell", "substrate", "base", "electrophile", "solvent"]
SCORES = ["expected_yield", "p_hit", "feasibility", "selectivity"]


def export(binary, server, job, path, *options):
    command = [binary, "export", job, "--server", f"http://{server.address}", "--out", str(path)]
    finished = subprocess.run([*command, *options], capture_output=True)
    assert finished.returncode == 0, finished.stderr.decode()
    return finished.stdout


@pytest.fixture(scope="module")
def ranking(jobs, stubs, done):  # noqa: F811
    """The whole ranking over the wire."""
    return list(pages(jobs, stubs, job_id=done.job_id, page_size=7))


def check(rows, ranking):
    assert len(rows) == len(ranking) == 24
    for row, cell in zip(rows, ranking):
        for name in NAMES:
            assert row[name] == getattr(cell, name), name
        for name in SCORES:
            known = getattr(cell, name) if cell.HasField(name) else None
            assert row[name] == known, name
        assert row["temperature_c"] == cell.conditions.temperature_c
        assert row["dosing_min"] == cell.conditions.dosing_min
        assert row["additive"] is None
        assert len(row["cautions"]) == len(cell.cautions)


def test_parquet_is_the_ranking(binary, server, done, ranking, tmp_path):  # noqa: F811
    path = tmp_path / "cells.parquet"
    export(binary, server, done.job_id, path)
    table = pyarrow.parquet.read_table(path)
    check(table.to_pylist(), ranking)
    for name in ("rank", "cell"):
        assert table.schema.field(name).type == pa.uint64()
    for name in SCORES:
        assert table.schema.field(name).type == pa.float64() and table.schema.field(name).nullable
    assert table.to_pandas()["expected_yield"].is_monotonic_decreasing


def test_an_arrow_stream_is_the_ranking(binary, server, done, ranking):  # noqa: F811
    piped = export(binary, server, done.job_id, "-", "--format", "arrow")
    with pyarrow.ipc.open_stream(piped) as stream:
        check(stream.read_all().to_pylist(), ranking)


def test_csv_and_json_lines_are_the_ranking(binary, server, done, ranking, tmp_path):  # noqa: F811
    path = tmp_path / "cells.jsonl"
    export(binary, server, done.job_id, path)
    check([json.loads(line) for line in path.read_text(encoding="utf-8").splitlines()], ranking)

    path = tmp_path / "cells.csv"
    export(binary, server, done.job_id, path)
    with open(path, newline="", encoding="utf-8") as file:
        rows = list(csv.DictReader(file, strict=True))
    for row in rows:
        for name in [*SCORES, "rank", "cell", "temperature_c", "dosing_min"]:
            row[name] = float(row[name]) if row[name] else None
        row["additive"] = row["additive"] or None
        row["cautions"] = row["cautions"].split("; ") if row["cautions"] else []
    check(rows, ranking)
    assert path.read_bytes().count(b"\r\n") == 25


def test_filters_limits_and_files_that_are_there(binary, server, done, tmp_path):  # noqa: F811
    path = tmp_path / "few.jsonl"
    export(binary, server, done.job_id, path, "--filter", "base = LDA", "--limit", "3")
    rows = [json.loads(line) for line in path.read_text().splitlines()]
    assert [row["base"] for row in rows] == ["LDA"] * 3
    again = [binary, "export", done.job_id, "--server", f"http://{server.address}", "--out", str(path)]
    refused = subprocess.run(again, capture_output=True, text=True)
    assert refused.returncode == 2 and "is there already" in refused.stderr
    assert len(path.read_text().splitlines()) == 3
    assert subprocess.run([*again, "--force"]).returncode == 0
    assert len(path.read_text().splitlines()) == 24
    assert list(tmp_path.iterdir()) == [path], "no half of a file is left"
