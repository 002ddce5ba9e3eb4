"""Which folder may include what. The one place to change when a layer is added.

Arrows point down only. A folder may include its own headers, those of the folders named here, and no others.
"""

BASE = {"station/base"}
DRIVERS = BASE | {"drivers/wire", "drivers/phantom", "drivers/adapter"}
FROM_THE_LEDGER = BASE | {"station/measure", "limits", "db"}
ROUTINE = DRIVERS | FROM_THE_LEDGER | {"station/sequence"}
READERS = FROM_THE_LEDGER | {"station/trace", "station/tuning"}

LAYERS = {
    "station/base": set(),
    "drivers/wire": BASE,
    "drivers/phantom": BASE | {"drivers/wire"},
    "drivers/adapter": BASE | {"drivers/wire"},
    "drivers/emulated": BASE | {"drivers/wire"},
    "station/measure": BASE,
    "limits": BASE,
    "db": BASE,
    "station/sequence": ROUTINE,
    "station/sequence/production": ROUTINE | {"drivers/emulated"},
    "station/tuning": FROM_THE_LEDGER,
    "station/trace": FROM_THE_LEDGER,
    "station/pages": READERS,
    "station/text": ROUTINE | READERS | {"station/sequence/production"},
    "station/windows": ROUTINE | READERS | {"station/pages"},
}
# The program's own files beside main.cpp wire everything together.
LAYERS["station"] = set(LAYERS)

# Folders of tests that test no single layer, and the layer down to which they see.
TEST_REACH = {
    "trial": "station/sequence",
    "faults": "station/sequence/production",
    "made": "db",
    "screens": "station/windows",
    "rederive": "station/text",
    "speed": "station/trace",
    "fuzz": "station/text",
}

# A test folder may use the layer that it tests, all below it, the test folders of those, what tests share, and the
# emulated bench. A file beside it needs no path.
TEST_EXTRAS = {"tests/support", "drivers/emulated", "drivers/wire"}


class Library:
    """A header of another project, and who may include it.

    pattern     regular expression for the text between the brackets
    folders     layers that may (with the tests of that layer); None: all
    at_most     files of the product that may, in all
    headers     whether headers of the product may
    in_tests_too    whether that holds for headers of tests as well
    why         said when it is broken
    """

    def __init__(self, pattern, why, folders=None, at_most=None, headers=True, in_tests_too=False):
        self.pattern, self.why, self.folders, self.at_most, self.headers = pattern, why, folders, at_most, headers
        self.in_tests_too = in_tests_too


ASYNC = {"drivers/wire", "drivers/phantom", "drivers/adapter", "drivers/emulated", "station/sequence",
         "station/sequence/production", "station/text", "station"}
DRAWN = {"station/pages", "station/windows", "station"}

LIBRARIES = [
    Library(r"boost/asio\.hpp", "it takes 10 s to compile", folders=ASYNC, at_most=8, headers=False,
            in_tests_too=True),
    Library(r"boost/asio/.*", "only what waits for bytes or time knows Asio", folders=ASYNC),
    Library(r"CLI/.*", "it takes 12 s to compile; options are plain structs elsewhere", folders={"station"}, at_most=2,
            headers=False),
    Library(r"spdlog/.*", "logging stays behind one file", at_most=1, headers=False),
    Library(r"Eigen/.*", "it is slow to compile", at_most=4, headers=False),
    Library(r"nlohmann/json\.hpp", "it is slow to compile; headers take json_fwd.hpp", at_most=6, headers=False),
    Library(r"boost/math/.*", "distributions stand in one place", folders={"limits"}, headers=False),
    Library(r"yaml-cpp/.*", "documents are read strictly, through station/base/strict_yaml.h", folders={"station/base"},
            headers=False),
    Library(r"(sqlite3|zstd)\.h", "the ledger's storage stays behind db", folders={"db", "tests/speed"}),
    Library(r"openssl/.*", "hashes and signatures stay behind db", folders={"db"}),
    Library(r"zint\.h", "codes are drawn in pages", folders={"station/pages"}, at_most=1, headers=False),
    Library(r"QtWidgets", "the umbrella header takes seconds; name the class", folders=set()),
    Library(r"qcustomplot\.h", "plots stand in pages and windows", folders={"station/pages", "station/windows"}),
    Library(r"Q[A-Z]\w*|Qt\w+/.*", "the tool kit stays in pages, windows and main", folders=DRAWN),
]

# Headers that a layer shows to others must not drag these in.
STD_ONLY_OUTSIDE = {"db": r"(sqlite3|zstd)\.h|openssl/.*"}
