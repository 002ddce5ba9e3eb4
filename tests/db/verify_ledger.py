#!/usr/bin/env python3
"""Checks a ledger with stock python3, from db/CHAIN.md alone.

    verify_ledger.py LEDGER [--entry N --seal HASH] [--from N]
    verify_ledger.py --list FILE     lines "LEDGER" or "LEDGER<tab>N<tab>HASH"

Prints one line of JSON for each ledger; exit status 0 if all agree, 1 if one does not.
Runs are checked in their own order and the first fault ends the check, so which of several faults is named may differ
from the program's own answer; whether there is one may not.
"""
import argparse
import hashlib
import json
import sqlite3
import struct
import sys

APPLICATION_ID = 0x50574C47
LAYOUTS = {1: "c259876579837accc7a983fb3ae6fb3b0c5496d5c1b1cd66066ceb4bbb043cbf",
           2: "3ec2680e60e7a7dc27ea23099fdad174d5aec008406285d89a83a317a6645048",
           3: "751f023a779b26a08f7fcb609b8b94d784846b28b1fd061d9ec2b61f6e15ae75"}

# table: (kind of entry, list in data or None, column that holds the entry's number, [(column, how, member)])
TABLES = {
    "document": ("document", None, "entry", [
        ("entry", "entry", None), ("digest", "digest", "digest"), ("kind", "text", "kind"), ("name", "text", "name"),
        ("revision", "text", "revision"), ("size", "integer", "size"), ("text", "digested", "digest")]),
    "signature": ("document_signed", None, "entry", [
        ("entry", "entry", None), ("document", "digest", "document"), ("signer", "text", "signer"),
        ("role", "text", "role"), ("meaning", "text", "meaning"), ("public_key", "text", "public_key"),
        ("signature", "text", "signature")]),
    "document_state": ("document_state", None, "entry", [
        ("entry", "entry", None), ("document", "digest", "document"), ("state", "text", "state"),
        ("from_time", "text", "from")]),
    "run_opened": ("run_opened", None, "run", [
        ("run", "entry", None), ("serial", "text", "serial"), ("purpose", "text", "purpose"),
        ("emulated", "flag", "emulated"), ("lot", "text", "lot"), ("model", "text", "model"),
        ("nest", "integer", "nest"), ("station", "text", "station"), ("operator", "text", "operator"),
        ("try_number", "integer", "try_number"), ("software_version", "text", "software_version"),
        ("software_commit", "text", "software_commit"), ("compiler", "text", "compiler"),
        ("ambient_temperature_c", "decimal", "ambient_temperature_c")]),
    "run_document": ("run_opened", "documents", "run", [
        ("run", "entry", None), ("place", "place", None), ("role", "text", "role"),
        ("document", "digest", "digest")]),
    "run_device": ("run_opened", "devices", "run", [
        ("run", "entry", None), ("place", "place", None), ("role", "text", "role"),
        ("identity", "text", "identity"), ("firmware", "text", "firmware"),
        ("certificate_number", "text", "certificate_number"), ("certificate", "maybe_digest", "certificate")]),
    "run_closed": ("run_closed", None, "entry", [
        ("run", "integer", "run"), ("entry", "entry", None), ("verdict", "text", "verdict"), ("cause", "text", "cause"),
        ("cause_words", "text", "cause_words"), ("failing", "words", "failing"),
        ("provisional", "flag", "provisional"), ("readings", "integer", "readings"),
        ("captures", "integer", "captures"), ("proof", "digest", "proof")]),
    "pruned": ("prune", "captures", "entry", [("capture", "item", None), ("entry", "entry", None)]),
    "carried_try": ("tries_carried", "tries", "entry", [
        ("serial", "text", "serial"), ("purpose", "text", "purpose"), ("tries", "integer", "tries"),
        ("entry", "entry", None), ("place", "place", None)]),
    # Every kind but those of runs; one row for each of the three that the entry names.
    "entry_about": (None, None, "entry", [("entry", "entry", None), ("subject", "subject", None), ("name", "name", None)]),
}
SINCE = {"carried_try": 2, "entry_about": 3}  # tables that an earlier layout lacks

READING = [("place", "integer"), ("check_slug", "text"), ("value", "maybe_real"), ("none_reason", "maybe_text"),
           ("expanded_uncertainty", "maybe_real"), ("unit", "text"), ("lower_limit", "maybe_real"),
           ("upper_limit", "maybe_real"), ("acceptance_lower", "maybe_real"), ("acceptance_upper", "maybe_real"),
           ("margin", "maybe_real"), ("conformance_probability", "maybe_real"), ("ok", "text"),
           ("definition", "text"), ("cut_short", "flag")]
CAPTURE = [("number", "integer"), ("kind", "text"), ("set_label", "text"), ("packing", "text"),
           ("decoded_size", "integer"), ("stored_size", "integer"), ("decoded_digest", "digest"),
           ("stored_digest", "digest")]


class Fault(Exception):
    def __init__(self, table, row, column, what):
        super().__init__(f"{table} {row} {column}: {what}")
        self.place = {"table": table, "row": str(row), "column": column, "what": what}


def sha256(data):
    return hashlib.sha256(data).digest()


def is_integer(value):
    return isinstance(value, int) and not isinstance(value, bool)


def check_layout(db):
    if db.execute("PRAGMA application_id").fetchone()[0] != APPLICATION_ID:
        raise Fault("file", "", "application_id", "is not that of a ledger")
    step = db.execute("PRAGMA user_version").fetchone()[0]
    if step not in LAYOUTS:
        raise Fault("file", "", "user_version", "is not known")
    digest = hashlib.sha256()
    sql = "SELECT type, name, tbl_name, coalesce(sql, '') FROM sqlite_schema ORDER BY type, name"
    for row in db.execute(sql):
        for text in row:
            digest.update(text.encode() + b"\0")
    if digest.hexdigest() != LAYOUTS[step]:
        raise Fault("sqlite_schema", "", "sql", "is not the layout of this step")
    return {name: table for name, table in TABLES.items() if SINCE.get(name, 1) <= step}


def expected_cell(how, member, item, number, place):
    """The cell that a column must hold, or Fault where the body cannot tell."""
    value = item.get(member) if member else None
    if how == "entry":
        return number
    if how == "place":
        return place
    if how == "item":
        return item
    if how == "text" and isinstance(value, str):
        return value
    if how == "integer" and is_integer(value):
        return value
    if how == "flag" and isinstance(value, bool):
        return int(value)
    if how == "decimal" and (value is None or isinstance(value, str)):
        return None if value is None else float(value)
    if how == "maybe_digest" and value is None:
        return None
    if how in ("digest", "maybe_digest") and isinstance(value, str):
        return bytes.fromhex(value)
    if how == "words" and isinstance(value, list):
        return ", ".join(value)
    raise Fault("entry", number, "body", f"lacks {member}")


def same(found, expected):
    return type(found) is type(expected) and found == expected


def check_projected(db, table, number, data):
    kind, list_name, key, columns = TABLES[table]
    items = [data] if list_name is None else data[list_name]
    if table == "entry_about":
        items = [{"subject": s, "name": data[s]} for s in ("lot", "person", "serial")
                 if isinstance(data, dict) and isinstance(data.get(s), str) and data[s] != ""]
        columns = [("entry", "entry", None), ("subject", "text", "subject"), ("name", "text", "name")]
    order = "subject" if table == "entry_about" else next((c for c, how, _ in columns if how in ("place", "item")), key)
    names = ", ".join(c for c, _, _ in columns)
    rows = db.execute(f"SELECT {names} FROM {table} WHERE {key} = ? ORDER BY {order}", (number,)).fetchall()
    if len(rows) != len(items):
        raise Fault(table, number, "", f"has {len(rows)} rows, the entry says {len(items)}")
    for place, (row, item) in enumerate(zip(rows, items)):
        for (column, how, member), found in zip(columns, row):
            if how == "digested":
                good = isinstance(found, str) and hashlib.sha256(found.encode()).hexdigest() == item[member]
            else:
                good = same(found, expected_cell(how, member, item, number, place))
            if not good:
                raise Fault(table, f"{number}.{place}", column, "is not what the entry says")


def check_entries(db, tables, first):
    previous, count = bytes(32), 0
    if first > 1:
        before = db.execute("SELECT hash FROM entry WHERE number = ?", (first - 1,)).fetchone()
        if before is None:
            raise Fault("entry", first - 1, "number", "is missing")
        previous, count = before[0], first - 1
    for number, time, kind, who, body, stored in db.execute(
            "SELECT number, time, kind, who, body, hash FROM entry WHERE number >= ? ORDER BY number", (first,)):
        count += 1
        if number != count:
            raise Fault("entry", count, "number", "is missing")
        if not isinstance(body, str) or not isinstance(stored, bytes):
            raise Fault("entry", number, "body", "has the wrong type")
        if sha256(previous + body.encode()) != stored:
            raise Fault("entry", number, "hash", "does not follow from the hash before it and the body")
        parsed = json.loads(body)
        if json.dumps(parsed, sort_keys=True, separators=(",", ":"), ensure_ascii=False) != body:
            raise Fault("entry", number, "body", "is not canonical")
        if set(parsed) != {"data", "kind", "number", "recipe", "time", "who"} or parsed["recipe"] != 1:
            raise Fault("entry", number, "body", "does not follow the recipe")
        for name, column in (("number", number), ("time", time), ("kind", kind), ("who", who)):
            if not same(column, parsed[name]):
                raise Fault("entry", number, name, "is not what the body says")
        if (number == 1) != (kind == "ledger_begun"):
            raise Fault("entry", number, "kind", "ledger_begun is entry 1 and no other")
        for table, (its_kind, _, _, _) in tables.items():
            if kind == its_kind or (its_kind is None and kind not in ("run_opened", "run_closed")):
                check_projected(db, table, number, parsed["data"])
        previous = stored
    if count < first:
        raise Fault("entry", first, "number", "is missing")
    return count - first + 1, previous


def check_nothing_over(db, tables):
    """Rows that belong to no entry, no run, no capture."""
    questions = [(table, f"SELECT count(*) FROM {table} WHERE {key} NOT IN (SELECT number FROM entry WHERE "
                  + (f"kind = '{kind}')" if kind else "kind NOT IN ('run_opened', 'run_closed'))"))
                 for table, (kind, _, key, _) in tables.items()]
    for table, key, parent, parent_key in (("reading", "run", "run_opened", "run"), ("capture", "run", "run_opened", "run"),
                                           ("capture_bytes", "capture", "capture", "number")):
        questions.append((table, f"SELECT count(*) FROM {table} WHERE {key} NOT IN (SELECT {parent_key} FROM {parent})"))
    for table, sql in questions:
        if db.execute(sql).fetchone()[0]:
            raise Fault(table, "", "", "has a row that belongs to nothing")


def encode(how, value, where):
    if how == "integer" and is_integer(value):
        return struct.pack(">q", value)
    if how == "text" and isinstance(value, str):
        return struct.pack(">I", len(value.encode())) + value.encode()
    if how == "maybe_text":
        return b"\0" if value is None else b"\1" + encode("text", value, where)
    if how == "maybe_real" and (value is None or isinstance(value, float)):
        return b"\0" if value is None else b"\1" + struct.pack(">d", value)
    if how == "flag" and value in (0, 1):
        return bytes([value])
    if how == "digest" and isinstance(value, bytes) and len(value) == 32:
        return value
    raise Fault(where, "", "", f"holds {value!r} where {how} must be")


def read_rows(db, table, columns, run):
    names = ", ".join(name for name, _ in columns)
    return db.execute(f"SELECT {names} FROM {table} WHERE run = ? ORDER BY {columns[0][0]}", (run,)).fetchall()


def row_cells(table, columns, rows):
    return [[encode(how, value, table) for (_, how), value in zip(columns, row)] for row in rows]


def tags(parts):
    return [sha256(part)[:4].hex() for part in parts]


def name_place(table, run, columns, rows, cells, row_tags, column_tags):
    """Raises Fault for the first row and column whose tag differs, if any does."""
    found_rows = tags(b"".join(row) for row in cells)
    wanted_rows = [row_tags[i:i + 8] for i in range(0, len(row_tags), 8)]
    if found_rows == wanted_rows:
        return
    at = next((i for i, (a, b) in enumerate(zip(found_rows, wanted_rows)) if a != b), min(len(found_rows), len(wanted_rows)))
    row = f"run {run}, row {at + 1}"
    if len(found_rows) != len(wanted_rows):
        raise Fault(table, row, "", f"{len(found_rows)} rows, the closing entry says {len(wanted_rows)}")
    found = tags(b"".join(row[i] for row in cells) for i in range(len(columns)))
    wanted = [column_tags[i:i + 8] for i in range(0, len(column_tags), 8)]
    column = next((columns[i][0] for i in range(len(columns)) if found[i] != wanted[i]), "")
    raise Fault(table, row, column, "is not what it was when the run was closed")


def check_run(db, run, data):
    """One run; data is that of its closing entry, or None while it is open."""
    readings, captures = read_rows(db, "reading", READING, run), read_rows(db, "capture", CAPTURE, run)
    reading_cells = row_cells("reading", READING, readings)
    capture_cells = row_cells("capture", CAPTURE, captures)
    if data is not None:
        proof = hashlib.sha256(struct.pack(">qqq", 1, run, len(readings)))
        proof.update(b"".join(b"".join(row) for row in reading_cells))
        proof.update(struct.pack(">q", len(captures)))
        proof.update(b"".join(b"".join(row) for row in capture_cells))
        if proof.hexdigest() != data["proof"]:
            name_place("reading", run, READING, readings, reading_cells, data["reading_row_tags"], data["reading_column_tags"])
            name_place("capture", run, CAPTURE, captures, capture_cells, data["capture_row_tags"], data["capture_column_tags"])
            raise Fault("run_closed", f"run {run}", "proof", "is not that of the readings and captures")
    for number, _, _, packing, decoded_size, stored_size, decoded_digest, stored_digest in captures:
        check_bytes(db, number, packing, decoded_size, stored_size, decoded_digest, stored_digest)
    return len(readings), len(captures)


def check_bytes(db, number, packing, decoded_size, stored_size, decoded_digest, stored_digest):
    there = db.execute("SELECT bytes FROM capture_bytes WHERE capture = ?", (number,)).fetchone()
    pruned = db.execute("SELECT 1 FROM pruned WHERE capture = ?", (number,)).fetchone()
    if (there is None) != (pruned is not None):
        raise Fault("capture_bytes", number, "bytes", "are missing" if there is None else "are there although pruned")
    if there is None:
        return
    data = there[0]
    if not isinstance(data, bytes) or len(data) != stored_size or sha256(data) != stored_digest:
        raise Fault("capture_bytes", number, "bytes", "do not have the stored digest")
    if packing == "none" and (len(data) != decoded_size or sha256(data) != decoded_digest):
        raise Fault("capture_bytes", number, "bytes", "do not have the decoded digest")


def check_runs(db, first):
    runs = readings = captures = 0
    for run, body in db.execute("SELECT o.run, e.body FROM run_opened AS o LEFT JOIN run_closed AS c ON c.run = o.run"
                                " LEFT JOIN entry AS e ON e.number = c.entry"
                            " WHERE c.entry IS NULL OR c.entry >= ? ORDER BY o.run", (first,)):
        counts = check_run(db, run, json.loads(body)["data"] if body is not None else None)
        runs, readings, captures = runs + 1, readings + counts[0], captures + counts[1]
    return runs, readings, captures


def check_seal(db, entry, seal):
    found = db.execute("SELECT hash FROM entry WHERE number = ?", (entry,)).fetchone()
    if found is None or found[0].hex() != seal:
        raise Fault("entry", entry, "hash", "is not the printed seal")


def verify(path, entry=None, seal=None, first=1):
    answer = {"file": path, "ok": False, "first_fault": None}
    try:
        db = sqlite3.connect(f"file:{path}?mode=ro", uri=True)
        try:
            tables = check_layout(db)
            answer["entries"], newest = check_entries(db, tables, first)
            answer["seal"] = newest.hex()
            check_nothing_over(db, tables)
            answer["runs"], answer["readings"], answer["captures"] = check_runs(db, first)
            if seal:
                check_seal(db, entry, seal)
            good = db.execute("PRAGMA integrity_check(1)").fetchone()[0]
            if good != "ok":
                raise Fault("file", "", "", good)
            answer["ok"] = True
        finally:
            db.close()
    except Fault as fault:
        answer["first_fault"] = fault.place
    except (sqlite3.Error, ValueError, KeyError, TypeError, AttributeError) as error:
        answer["first_fault"] = {"table": "file", "row": "", "column": "", "what": f"{type(error).__name__}: {error}"}
    return answer


def main():
    parser = argparse.ArgumentParser(description="Checks a ledger from db/CHAIN.md alone.")
    parser.add_argument("ledger", nargs="?")
    parser.add_argument("--entry", type=int)
    parser.add_argument("--seal")
    parser.add_argument("--from", type=int, default=1, dest="first",
                        help="first entry to check; the hash before it is taken as it stands")
    parser.add_argument("--list")
    given = parser.parse_args()
    if given.list:
        with open(given.list, encoding="utf-8") as lines:
            asked = [line.rstrip("\n").split("\t") for line in lines]
    else:
        asked = [[given.ledger] + ([given.entry, given.seal] if given.seal else [])]
    all_good = True
    for path, *printed in asked:
        answer = verify(path, *((int(printed[0]), printed[1]) if printed else (None, None)), given.first)
        print(json.dumps(answer, sort_keys=True), flush=True)
        all_good = all_good and answer["ok"]
    return 0 if all_good else 1


if __name__ == "__main__":
    sys.exit(main())
