#!/usr/bin/env python3
"""Every sentence of the windows stands in each language file, and no file has one that the windows no longer say.

usage: words_follow.py ROOT

Reads the sources with lupdate, into a file of its own, and compares. Exits 1 with a line for each difference.
"""
import subprocess
import sys
import tempfile
import xml.etree.ElementTree as ElementTree
from pathlib import Path

LANGUAGES = ("de", "es")


def sentences(path):
    return {(context.findtext("name"), message.findtext("source"))
            for context in ElementTree.parse(path).getroot().iter("context") for message in context.iter("message")}


def lupdate():
    for folder in ("/usr/lib/qt6/bin", "/usr/bin"):
        program = Path(folder) / "lupdate"
        if program.exists():
            return str(program)
    sys.exit("there is no lupdate: install the package qt6-l10n-tools")


def main():
    root = Path(sys.argv[1])
    with tempfile.TemporaryDirectory() as folder:
        found = Path(folder) / "found.ts"
        subprocess.run([lupdate(), "-silent", "-no-obsolete", "-locations", "none", "-I", ".", "station/windows", "-ts",
                        str(found)], cwd=root, check=True)
        said = sentences(found)
    if len(said) < 100:
        sys.exit(f"lupdate found only {len(said)} sentences")
    faults = 0
    for language in LANGUAGES:
        known = sentences(root / "station/windows/languages" / f"windows_{language}.ts")
        for context, sentence in sorted(said - known):
            print(f"{language}: missing in {context}: {sentence}")
        for context, sentence in sorted(known - said):
            print(f"{language}: no longer said in {context}: {sentence}")
        faults += len(said ^ known)
    print(f"{len(said)} sentences, {len(LANGUAGES)} languages, {faults} differences")
    sys.exit(1 if faults else 0)


if __name__ == "__main__":
    main()
