#!/bin/sh
# Every shipped file against the schema of its kind (docs/formats/<kind>.schema.json, JSON Schema 2020-12), and proof that the
# schemas refuse: each file of tests/data/schemas/wrong must fail, each of good must pass.
# Usage: check_schemas.sh SOURCE_DIR
set -eu
root=${1:?source directory}
python=${PYTHON:-/usr/bin/python3}
if ! "$python" -c 'import jsonschema' 2>/dev/null; then
  if [ -n "${CI:-}${SEPTUM_CI:-}" ]; then
    echo "python3 with jsonschema is needed here" >&2
    exit 1
  fi
  echo "skipped: no python3 with jsonschema"
  exit 0
fi
exec "$python" - "$root" <<'PY'
import glob, json, os, re, sys
from jsonschema import Draft202012Validator

root = sys.argv[1]
schemas, faults, counts = {}, [], {"shipped": 0, "good": 0, "wrong": 0}

def say(path, message):
    faults.append("%s: %s" % (os.path.relpath(path, root), message))

def once(pairs):
    keys = [k for k, _ in pairs]
    twice = {k for k in keys if keys.count(k) > 1}
    if twice:
        raise ValueError("a key stands twice: %s" % ", ".join(sorted(twice)))
    return dict(pairs)

def load(path):
    with open(path, encoding="utf-8") as f:
        return json.load(f, object_pairs_hook=once)

for path in sorted(glob.glob(root + "/docs/formats/*.schema.json")):
    schema = load(path)
    Draft202012Validator.check_schema(schema)
    if schema.get("$schema") != "https://json-schema.org/draft/2020-12/schema":
        say(path, "is not a 2020-12 schema")
    schemas[os.path.basename(path)[: -len(".schema.json")]] = Draft202012Validator(schema)

def errors(path):
    """Messages of what the schema of the file's kind refuses; None without a kind."""
    data = load(path)
    kind = data.get("septum") if isinstance(data, dict) else None
    if not isinstance(kind, str) or "/" not in kind:
        return ["has no \"septum\": \"<kind>/1\""]
    name = kind.split("/")[0]
    if name not in schemas:
        return ["no docs/formats/%s.schema.json for its kind" % name]
    return ["%s: %s" % (e.json_path, e.message[:200]) for e in schemas[name].iter_errors(data)]

for pattern in ("catalogs/*.json", "prices/*.json", "docs/examples/*.json", "docs/examples/*/*.json"):
    for path in sorted(glob.glob(os.path.join(root, pattern))):
        counts["shipped"] += 1
        for message in errors(path):
            say(path, message)
for path in sorted(glob.glob(root + "/tests/data/schemas/good/*.json")):
    counts["good"] += 1
    for message in errors(path):
        say(path, message)
for path in sorted(glob.glob(root + "/tests/data/schemas/wrong/*.json")):
    counts["wrong"] += 1
    if not errors(path):
        say(path, "should have been refused")

# The keys that the reader knows are the keys that the schema knows (lengths: _m in the table, _mm in the files).
reader = open(root + "/src/input/catalog_records.c", encoding="utf-8").read()
tables = {"layer": "boards", "frame": "frames", "fill": "fills", "mount": "mounts", "target": "targets"}
for table, kind in tables.items():
    body = re.search(r"static const field %s_fields\[\] = \{(.*?)\n\};" % table, reader, re.S).group(1)
    rows = re.findall(r"\{\"([a-z0-9_]+)\", (FIELD_[A-Z]+)", body)
    read = {key[:-1] + "mm" if how == "FIELD_LENGTH" and not key.startswith("max_height") else key for key, how in rows}
    known = set(schemas[kind].schema["$defs"]["record"]["properties"])
    if read != known:
        faults.append("%s: reader and schema differ in %s" % (kind, ", ".join(sorted(read ^ known))))

# What a project says as a brief does is asked as a brief asks it; openings and counts belong to a wall.
brief, project = schemas["brief"].schema, schemas["project"].schema
def plain(wall):
    own = ("length_", "corners", "tees", "free_ends", "doors")
    keys = {k: v for k, v in wall["properties"].items() if not k.startswith(own)}
    return keys, [r for r in wall["allOf"] if not any(k.startswith(own) for k in r["not"]["required"])]
shared = set(brief["properties"]) - {"septum", "openings"}
for key in sorted(shared):
    one, other = brief["properties"][key], project["properties"].get(key)
    if one != other and not (key == "wall" and plain(one) == plain(other) and plain(other)[0] == other["properties"]):
        faults.append("project: %s is not what a brief's is" % key)
for name in sorted(set(brief["$defs"]) - {"opening"}):
    if brief["$defs"][name] != project["$defs"].get(name):
        faults.append("project: $defs/%s is not what a brief's is" % name)

for kind in ("boards", "frames", "fills", "mounts", "targets", "wall", "project"):
    if not any(os.path.basename(p).startswith(kind + "-") for p in glob.glob(root + "/tests/data/schemas/wrong/*.json")):
        faults.append("no wrong file for kind %s" % kind)
for fault in faults:
    print(fault)
print("%d shipped, %d good, %d wrong files; %d faults" % (counts["shipped"], counts["good"], counts["wrong"], len(faults)))
sys.exit(1 if faults or counts["shipped"] == 0 else 0)
PY
