#!/usr/bin/env python3
"""Each rule of the include check fires on a planted fault, and on nothing in a tree without one."""
import tempfile
import unittest
from pathlib import Path

from include_graph import faults_in

GOOD = {
    "station/base/units.h": "#pragma once\n#include <string>\n",
    "station/base/units.cpp": '#include "station/base/units.h"\n#include <yaml-cpp/yaml.h>\n',
    "station/measure/centroid.cpp": '#include "station/base/units.h"\n',
    "drivers/wire/port.h": "#pragma once\n#include <boost/asio/awaitable.hpp>\n",
    "drivers/wire/port.cpp": '#include "drivers/wire/port.h"\n#include <boost/asio.hpp>\n',
    "drivers/emulated/bench.h": '#pragma once\n#include "drivers/wire/port.h"\n',
    "db/store.h": "#pragma once\n#include <string>\n",
    "db/connection.h": "#pragma once\n#include <sqlite3.h>\n",
    "db/store.cpp": '#include "db/store.h"\n#include "db/connection.h"\n',
    "station/sequence/routine.cpp": '#include "db/store.h"\n#include "drivers/wire/port.h"\n',
    "station/sequence/production/hands.cpp": '#include "drivers/emulated/bench.h"\n',
    "station/main.cpp": '#include "commit_stamp.h"\n#include "drivers/emulated/bench.h"\n#include <CLI/CLI.hpp>\n',
    "tests/support/expect.h": "#pragma once\n",
    "tests/db/store_tests.cpp": '#include "db/connection.h"\n#include "tests/support/expect.h"\n#include <sqlite3.h>\n',
    "tests/sequence/routine_tests.cpp": '#include "drivers/emulated/bench.h"\n#include "db/store.h"\n',
}


def faults_with(planted):
    with tempfile.TemporaryDirectory() as folder:
        for name, text in {**GOOD, **planted}.items():
            path = Path(folder) / name
            path.parent.mkdir(parents=True, exist_ok=True)
            path.write_text(text, encoding="utf-8")
        return faults_in(Path(folder))


class IncludeGraph(unittest.TestCase):
    def expect(self, planted, *wanted):
        faults = faults_with(planted)
        self.assertEqual(len(faults), len(wanted), faults)
        for fault, words in zip(sorted(faults), sorted(wanted)):
            self.assertIn(words, fault)

    def test_a_good_tree_has_no_fault(self):
        self.expect({})

    def test_an_arrow_that_points_up(self):
        self.expect({"station/base/up.cpp": '#include "db/store.h"\n'}, "station/base/up.cpp:1: db/store.h lies on no arrow")

    def test_neighbours_do_not_know_each_other(self):
        self.expect({"station/measure/x.cpp": '\n#include "db/store.h"\n'}, "station/measure/x.cpp:2: db/store.h lies on")
        self.expect({"limits/x.cpp": '#include "drivers/wire/port.h"\n'}, "limits/x.cpp:1: drivers/wire/port.h lies on")

    def test_the_routine_does_not_know_the_emulated_bench(self):
        self.expect({"station/sequence/x.cpp": '#include "drivers/emulated/bench.h"\n'}, "lies on no arrow")

    def test_a_test_knows_only_what_its_layer_knows(self):
        self.expect({"tests/measure/x.cpp": '#include "db/store.h"\n'}, "tests/measure/x.cpp:1: db/store.h lies on no arrow")

    def test_helpers_of_tests(self):
        self.expect({"tests/phantom/trial.h": "#pragma once\n", "tests/phantom/x.cpp": '#include "trial.h"\n'})
        self.expect({"tests/wire/trial.h": "#pragma once\n", "tests/phantom/x.cpp": '#include "tests/wire/trial.h"\n'})
        self.expect({"tests/db/trial.h": "#pragma once\n", "tests/limits/x.cpp": '#include "tests/db/trial.h"\n'}, "lies on no arrow")

    def test_tests_of_no_single_layer(self):
        world = {"tests/trial/world.h": '#pragma once\n#include "db/store.h"\n'}
        self.expect({**world, "tests/sequence/x.cpp": '#include "tests/trial/world.h"\n'})
        self.expect({**world, "tests/faults/x.cpp": '#include "tests/trial/world.h"\n'})
        self.expect({**world, "tests/limits/x.cpp": '#include "tests/trial/world.h"\n'}, "lies on no arrow")

    def test_an_include_that_is_not_written_from_the_top(self):
        self.expect({"db/x.cpp": '#include "store.h"\n'}, "db/x.cpp:1: there is no store.h")

    def test_a_folder_that_is_no_layer(self):
        self.expect({"drivers/stray/x.cpp": "\n"}, "drivers/stray/x.cpp:1: the folder is none of")

    def test_asio_whole_in_a_header(self):
        self.expect({"drivers/wire/x.h": "#pragma once\n#include <boost/asio.hpp>\n"}, "drivers/wire/x.h:2: <boost/asio.hpp> is not for headers")
        self.expect({"tests/wire/x.h": "#pragma once\n#include <boost/asio.hpp>\n"}, "tests/wire/x.h:2: <boost/asio.hpp> is not for headers")

    def test_asio_whole_in_too_many_files(self):
        many = {f"drivers/wire/x{i}.cpp": "#include <boost/asio.hpp>\n" for i in range(8)}
        self.expect(many, "is included by 9 files, at most 8 may")

    def test_asio_where_nothing_waits(self):
        self.expect({"station/measure/x.cpp": "#include <boost/asio/post.hpp>\n"}, "is not for this folder")
        self.expect({"db/x.h": "#pragma once\n#include <boost/asio/post.hpp>\n"}, "is not for this folder")

    def test_options_library_outside_main(self):
        self.expect({"station/base/x.cpp": "#include <CLI/CLI.hpp>\n"}, "<CLI/CLI.hpp> is not for this folder")

    def test_json_in_a_header(self):
        self.expect({"station/base/x.h": "#pragma once\n#include <nlohmann/json.hpp>\n"}, "is not for headers")

    def test_matrices_logging_and_json_in_too_many_files(self):
        for header, bound in (("Eigen/Dense", 4), ("spdlog/spdlog.h", 1), ("nlohmann/json.hpp", 6)):
            many = {f"limits/x{i}.cpp": f"#include <{header}>\n" for i in range(bound + 1)}
            self.expect(many, f"at most {bound} may")

    def test_yaml_around_the_strict_reader(self):
        self.expect({"limits/x.cpp": "#include <yaml-cpp/yaml.h>\n"}, "<yaml-cpp/yaml.h> is not for this folder")

    def test_distributions_outside_limits(self):
        self.expect({"station/measure/x.cpp": "#include <boost/math/distributions/normal.hpp>\n"}, "is not for this folder")

    def test_storage_outside_the_ledger(self):
        self.expect({"station/sequence/x.cpp": "#include <sqlite3.h>\n"}, "<sqlite3.h> is not for this folder")
        self.expect({"station/base/x.cpp": "#include <openssl/evp.h>\n"}, "<openssl/evp.h> is not for this folder")

    def test_a_header_that_drags_storage_along(self):
        self.expect({"db/rows.h": '#pragma once\n#include "db/connection.h"\n', "station/sequence/x.cpp": '#include "db/rows.h"\n'},
                    "station/sequence/x.cpp:1: db/rows.h drags in <sqlite3.h> through db/connection.h")

    def test_the_tool_kit(self):
        self.expect({"station/windows/x.cpp": "#include <QtWidgets>\n"}, "<QtWidgets> is not for this folder")
        self.expect({"station/sequence/x.cpp": "#include <QString>\n"}, "<QString> is not for this folder")
        self.expect({"station/text/x.cpp": "#include <qcustomplot.h>\n"}, "<qcustomplot.h> is not for this folder")
        self.expect({"station/windows/x.cpp": "#include <QLabel>\n#include <QtWidgets/QPushButton>\n#include <qcustomplot.h>\n"})

    def test_pages_run_no_line(self):
        self.expect({"station/pages/x.cpp": '#include "drivers/wire/port.h"\n'}, "station/pages/x.cpp:1: drivers/wire/port.h lies on no arrow")
        self.expect({"station/pages/x.cpp": '#include "station/base/units.h"\n#include <QPainter>\n#include <zint.h>\n',
                     "tests/pages/x.cpp": "#include <QProcess>\n"})

    def test_codes_outside_pages(self):
        self.expect({"station/text/x.cpp": "#include <zint.h>\n"}, "<zint.h> is not for this folder")
        self.expect({"station/pages/x.h": "#pragma once\n#include <zint.h>\n"}, "<zint.h> is not for headers")

    def test_a_header_that_may_be_read_twice(self):
        self.expect({"db/x.h": "\n"}, "db/x.h:1: no #pragma once")

    def test_an_empty_tree_is_a_fault(self):
        with tempfile.TemporaryDirectory() as folder:
            self.assertEqual(len(faults_in(Path(folder))), 1)


if __name__ == "__main__":
    unittest.main()
