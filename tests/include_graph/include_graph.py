#!/usr/bin/env python3
"""Checks that includes follow the arrows and the compile-time rules of rules.py.

usage: include_graph.py [ROOT]

Prints one line a fault, "file:line: what", and exits 1 if there is one. The text of the sources is read as it stands:
what hides behind an #if is checked too.
"""
import re
import sys
from pathlib import Path

from rules import LAYERS, LIBRARIES, STD_ONLY_OUTSIDE, TEST_EXTRAS, TEST_REACH

INCLUDE = re.compile(r'^\s*#\s*include\s*(?:"([^"]+)"|<([^>]+)>)')
TOP_FOLDERS = ("station", "drivers", "limits", "db", "tests")
GENERATED = {"commit_stamp.h"}


class Source:
    """One file of ours: `ours` and `others` hold (line, name) of its includes."""

    def __init__(self, root, path):
        self.path = path
        self.name = path.relative_to(root).as_posix()
        self.is_header = path.suffix == ".h"
        self.text = path.read_text(encoding="utf-8")
        self.ours, self.others = [], []
        for number, line in enumerate(self.text.splitlines(), 1):
            match = INCLUDE.match(line)
            if match and match[1] and match[1] not in GENERATED and not match[1].endswith(".moc"):
                self.ours.append((number, match[1]))
            elif match and match[2]:
                self.others.append((number, match[2]))


def layer_of(name):
    """The folder of rules.py that a file belongs to: the deepest one. None for tests and strangers."""
    folder = name.rpartition("/")[0]
    while folder and folder not in LAYERS:
        folder = folder.rpartition("/")[0]
    return folder or None


def tested_layer(name):
    """The layer that a file under tests/ tests, by its folder's name; None if it tests none."""
    parts = name.split("/")
    if parts[0] != "tests" or len(parts) < 3:
        return None
    by_name = {layer.rpartition("/")[2]: layer for layer in LAYERS}
    return TEST_REACH.get(parts[1]) or by_name.get(parts[1])


def allowed_folders(name):
    """What the file may include of ours, as layers and test folders."""
    if not name.startswith("tests/"):
        layer = layer_of(name)
        return None if layer is None else LAYERS[layer] | {layer}
    layer = tested_layer(name)
    own = {"/".join(name.split("/")[:2])}
    layers = LAYERS[layer] | {layer} if layer else set()
    helpers = {"tests/" + below.rpartition("/")[2] for below in layers}
    helpers |= {"tests/" + folder for folder, reach in TEST_REACH.items() if reach in layers}
    return own | helpers | TEST_EXTRAS | {"station/base"} | layers


def folder_of_include(name):
    return "/".join(name.split("/")[:2]) if name.startswith("tests/") else layer_of(name)


def read_sources(root):
    files = [p for top in TOP_FOLDERS for p in sorted((root / top).rglob("*")) if p.suffix in (".h", ".cpp")]
    return {source.name: source for source in (Source(root, path) for path in files)}


def arrow_faults(root, sources):
    for source in sources.values():
        allowed = allowed_folders(source.name)
        if allowed is None:
            yield f"{source.name}:1: the folder is none of rules.py"
            continue
        for line, name in source.ours:
            beside = source.path.parent / name
            if source.name.startswith("tests/") and beside.is_file():
                continue  # a helper of one test folder
            if name not in sources and not (root / name).is_file():
                yield f"{source.name}:{line}: there is no {name}; includes are written from the top folder"
            elif folder_of_include(name) not in allowed:
                yield f"{source.name}:{line}: {name} lies on no arrow from here"


def library_faults(sources):
    users = {library: set() for library in LIBRARIES}
    for source in sources.values():
        place = layer_of(source.name) or tested_layer(source.name)
        is_test = source.name.startswith("tests/")
        for line, name in source.others:
            library = next((l for l in LIBRARIES if re.fullmatch(l.pattern, name)), None)
            if library is None:
                continue
            here = {place, source.name.rpartition("/")[0]}
            if library.folders is not None and not here & library.folders and not (is_test and place is None):
                yield f"{source.name}:{line}: <{name}> is not for this folder: {library.why}"
            if source.is_header and not library.headers and (library.in_tests_too or not is_test):
                yield f"{source.name}:{line}: <{name}> is not for headers: {library.why}"
            if not is_test:
                users[library].add(source.name)
    for library, names in users.items():
        if library.at_most is not None and len(names) > library.at_most:
            yield (f"{sorted(names)[-1]}:1: <{library.pattern}> is included by {len(names)} files, at most "
                   f"{library.at_most} may: {library.why}")


def reached(sources, name, seen):
    """All files of ours that `name` includes, through any number of steps, itself among them."""
    if name in seen or name not in sources:
        return seen
    seen.add(name)
    for _, inner in sources[name].ours:
        reached(sources, inner, seen)
    return seen


def leak_faults(sources):
    for source in sources.values():
        for line, name in source.ours:
            pattern = STD_ONLY_OUTSIDE.get(layer_of(name))
            if pattern is None or layer_of(source.name) == layer_of(name) or source.name.startswith("tests/"):
                continue
            for inner in sorted(reached(sources, name, set())):
                for _, other in sources[inner].others:
                    if re.fullmatch(pattern, other):
                        yield f"{source.name}:{line}: {name} drags in <{other}> through {inner}"


def header_faults(sources):
    for source in sources.values():
        if source.is_header and "#pragma once" not in source.text:
            yield f"{source.name}:1: no #pragma once"


def faults_in(root):
    sources = read_sources(root)
    if not sources:
        return [f"{root}: no sources found"]
    faults = list(arrow_faults(root, sources))
    return faults + [fault for check in (library_faults, leak_faults, header_faults) for fault in check(sources)]


def main():
    root = Path(sys.argv[1] if len(sys.argv) > 1 else Path(__file__).resolve().parents[2])
    faults = faults_in(root)
    print("\n".join(faults) if faults else f"{len(read_sources(root))} files, no include against the rules")
    return 1 if faults else 0


if __name__ == "__main__":
    sys.exit(main())
