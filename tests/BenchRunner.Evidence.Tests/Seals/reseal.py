"""Forms every seal of an evidence file again from docs/evidence.md alone, and decodes codec 0 payloads.

Shares no code with the program: Python's own sqlite3, struct and hashlib. Prints a line a seal; exit 1 on a difference.
"""
import hashlib
import sqlite3
import struct
import sys

FORM = [  # table, columns in order; *x is a text kept in word, @x the SHA-256 of a file kept in content
    ("run", "uid origin device *lot attempt again *part kind position companion *sequence sequence_revision "
            "@sequence_content *bench simulated operator armed_by *algorithm *platform started_at"),
    ("run_file", "role path @content"),
    ("instrument", "role identity serial firmware calibrated_at due_at certificate"),
    ("event", "ordinal at source severity kind message"),
    ("capture", "ordinal *operating_point number taken_at bus_voltage temperature first_pulse gap second_pulse "
                "gate_on gate_off channels samples raw_bytes stored_bytes payload_sha256"),
    ("trace", "capture channel offset length codec samples time_origin sample_interval increment value_origin "
              "reference low_rail high_rail sha256"),
    ("verdict", "capture valid findings not_evaluated load_current bus_voltage next_first_pulse"),
    ("capture_value", "capture *quantity *definition value *unit from_time to_time reason"),
    ("hold", "ordinal *operating_point at bus_voltage supply_current first_voltage last_voltage seconds leakage bound "
             "conforms"),
    ("acquisition", "capture count_before count_after"),
    ("measurement", "*operating_point *quantity *definition *lot value *unit standard_uncertainty "
                    "expanded_uncertainty coverage_factor degrees_of_freedom captures lower_limit upper_limit "
                    "conformity reason"),
    ("decision", "outcome reason captures_taken captures_valid *sequence sequence_revision @sequence_content "
                 "*algorithm *platform scored_at"),
]
ENTRY_FORM = [("entry", "uid origin kind at author"), ("note", "device *lot kind because"), ("placement", "run place")]
ORDER = {"run_file": 3, "instrument": 1, "event": 1, "capture": 1, "trace": 2, "verdict": 1, "capture_value": 3,
         "hold": 1, "acquisition": 1, "measurement": 3}


def item(value):
    if value is None:
        return b"n"
    if isinstance(value, int):
        return b"i%d;" % value
    if isinstance(value, float):
        return b"r" + struct.pack(">d", value)
    data = value.encode("utf-8")
    return b"t%d:" % len(data) + data


def row(table, values):
    return table.encode() + b"".join(map(item, values)) + b"\n"


def main(path):
    db = sqlite3.connect(f"file:{path}?mode=ro", uri=True)
    db.row_factory = sqlite3.Row
    word = dict(db.execute("select id, text from word"))
    content = dict(db.execute("select id, sha256 from content"))
    origin = dict(db.execute("select id, uid from origin"))
    rows = {table: [dict(r) for r in db.execute(f"select * from {table}")] for table, _ in FORM + ENTRY_FORM}
    captures = {r["id"]: r for r in rows["capture"]}

    def resolve(column, r):
        if column == "origin":
            return origin[r[column]]
        if column == "capture":
            return captures[r[column]]["ordinal"]
        if column == "run":
            return next(run["uid"] for run in rows["run"] if run["id"] == r[column])
        name = column.lstrip("*@")
        value = r[name]
        return value if name == column or value is None else (word if column[0] == "*" else content)[value]

    def digest(run):
        total = hashlib.sha256()
        for table, columns in FORM:
            mine = [r for r in rows[table] if r.get("scoring", 0) == 0 and
                    (r["id"] if table == "run" else
                     captures[r["capture"]]["run"] if "run" not in r else r["run"]) == run]
            lines = [[resolve(c, r) for c in columns.split()] for r in mine]
            lines.sort(key=lambda line: [v.encode() if isinstance(v, str) else v for v in line[:ORDER.get(table, 0)]])
            for line in lines:
                total.update(row(table, line))
        return total.hexdigest()

    def entry_digest(entry):
        total = hashlib.sha256()
        for table, columns in ENTRY_FORM:
            for r in rows[table]:
                if r["id" if table == "entry" else "entry"] == entry:
                    total.update(row(table, [resolve(c, r) for c in columns.split()]))
        return total.hexdigest()

    good = True
    last = {}
    for s in db.execute("select * from seal order by origin, ordinal"):
        if s["kind"] == "run":
            of = next(r for r in rows["run"] if r["id"] == s["run"])
            mine = digest(of["id"])
        else:
            of = next(r for r in rows["entry"] if (r["origin"], r["ordinal"]) == (s["origin"], s["ordinal"]))
            mine = entry_digest(of["id"])
        uid = of["uid"]
        seal = hashlib.sha256(row("seal", [origin[s["origin"]], s["ordinal"], s["kind"], uid, s["sealed_at"], mine,
                                           last.get(s["origin"], "")])).hexdigest()
        good = good and seal == s["seal"]
        last[s["origin"]] = seal
        print(uid, seal)
    for r in db.execute("select * from trace join payload using (capture) where codec = 0"):
        part = r["bytes"][r["offset"]:r["offset"] + r["length"]]
        good = good and hashlib.sha256(part).hexdigest() == r["sha256"] and len(part) == 2 * r["samples"]
    return 0 if good else 1


sys.exit(main(sys.argv[1]))
