"""Exit statuses, and where messages go."""
import os
import sqlite3
import subprocess

from support import CommandTest, CARD, PASSFET, RATINGS, main, parts_csv


class ExitStatus(CommandTest):
    def test_done_is_0(self):
        self.import_demo()
        self.run_it("rank", CARD)
        for command in (["parts"], ["show", "KB30A8"], ["history", "KB30A8"], ["export", "out"],
                        ["backup", "copy.db"], ["undo", "1"]):
            self.run_it(*command)

    def test_no_part_passes_is_1(self):
        self.import_parts({"vds_max [V]": "12", "soa": "1ms 1:400 12:8", "part": "LOW"})
        self.run_it("rank", self.card(), status=1)

    def test_a_stalled_card_is_1(self):
        self.import_parts({})
        out, _ = self.run_it("rank", self.card(start_load_current=",6,,A"), status=1)
        self.assertIn("DOES NOT START", out)

    def test_an_audit_that_found_something_is_1(self):
        self.import_demo()
        out, _ = self.run_it("audit", status=1)
        self.assertIn("UB10042LF", out)

    def test_wrong_usage_is_2(self):
        self.import_demo()
        for arguments in ([], ["nonsense"], ["--nonsense"], ["rank"], ["rank", CARD, "--sort", "x"],
                          ["rank", CARD, "--top", "0"], ["rank", CARD, "--top", "3x"],
                          ["rank", CARD, "--where", "nothing>3"], ["rank", CARD, "--format", "xml"],
                          ["rank", CARD, "--nonsense"], ["rank", CARD, "--top"], ["parts", "x"],
                          ["show"], ["show", "NO-SUCH-PART"], ["undo", "x"], ["undo", "9"],
                          ["review", "KB30A8"], ["review", "KB30A8", "--accept", "--question"],
                          ["review", "KB30A8", "--question", "--by", "bob"],
                          ["import", RATINGS[0], "--decimal", "dot"]):
            out, err = self.run_it(*arguments, status=2)
            self.assertEqual(out, "", arguments)
            self.assertTrue(err, arguments)

    def test_an_unknown_option_says_how_to_find_the_known_ones(self):
        _, err = self.run_it("rank", CARD, "--tpo", "3", status=2)
        self.assertIn("--tpo", err)
        self.assertIn("rank --help", err)

    def test_the_database_option_behind_the_command_is_told_where_it_belongs(self):
        _, err = self.run_it("rank", "--db", "x.db", CARD, status=2)
        self.assertIn("before the command", err)

    def test_bad_input_is_3(self):
        self.import_demo()
        bad = self.write("bad.csv", "part,polarity,vds_max,tj_max\nX,N,30V\n")
        self.run_it("import", bad, status=3)
        self.run_it("rank", self.write("card.csv", "parameter,typ\nsupply_voltage,-\n"), status=3)
        self.run_it("import", "no-such-file.csv", status=4)
        self.run_it("review", "KB30A8", "--accept", "--by", "Ann", status=3)

    def test_a_database_that_is_none_is_4(self):
        self.run_it("rank", CARD, status=4)
        self.write("passfet.db", "this is a text\n" * 100)
        for command in (["rank", CARD], ["parts"], ["audit"], ["import", RATINGS[0]]):
            self.run_it(*command, status=4)
        self.assertEqual((self.folder / "passfet.db").read_text(), "this is a text\n" * 100)
        self.run_it("--db", "no/such/folder/x.db", "import", RATINGS[0], status=4)

    def test_a_database_that_stays_locked_is_5(self):
        self.import_demo()
        holder = sqlite3.connect(self.folder / "passfet.db", isolation_level=None)
        holder.execute("BEGIN EXCLUSIVE")
        _, err = self.run_it("parts", status=5)
        self.assertIn("30", err)
        holder.close()

    def test_the_database_comes_from_option_environment_or_folder(self):
        parts = self.write("p.csv", parts_csv({}))
        self.run_it("import", parts)
        self.run_it("import", parts, environment={"PASSFET_DB": "e.db"})
        self.run_it("--db", "o.db", "import", parts, environment={"PASSFET_DB": "e2.db"})
        self.assertEqual(sorted(p.name for p in self.folder.glob("*.db")),
                         ["e.db", "o.db", "passfet.db"])

    def test_help_and_version_are_0_and_on_stdout(self):
        self.assertIn("rank", self.run_it("--help")[0])
        self.assertRegex(self.run_it("--version")[0], r"^passfet \d+\.\d+\.\d+\n$")
        self.assertIn("--sort", self.run_it("rank", "--help")[0])


class Output(CommandTest):
    """A failed write is never a success."""

    def commands(self):
        self.import_demo()
        more = self.write("more.csv", parts_csv({}))
        return [["rank", CARD], ["rank", CARD, "--format", "json"], ["rank", CARD, "--format", "csv"],
                ["parts"], ["parts", "--format", "json"], ["parts", "--format", "csv"],
                ["show", "KB30A8"], ["history", "KB30A8"], ["audit"], ["--help"], ["--version"],
                ["rank", "--help"], ["import", more], ["export", "out"], ["export"]]

    def test_a_full_disk_is_4(self):
        if not os.path.exists("/dev/full"):
            self.skipTest("no /dev/full here")
        for command in self.commands():
            with open("/dev/full", "w") as full:
                done = self.start(*command, stdout=full, capture_output=False)
            self.assertEqual(done.returncode, 4, command)

    def test_a_closed_pipe_is_4(self):
        for command in self.commands():
            reader, writer = os.pipe()
            os.close(reader)
            done = self.start(*command, stdout=writer)
            os.close(writer)
            self.assertEqual(done.returncode, 4, command)

    def test_an_output_that_came_closed_is_4_and_no_file_is_written_in_its_place(self):
        for command in self.commands():
            command = " ".join(f"'{word}'" for word in [PASSFET, *command])
            done = subprocess.run(["sh", "-c", command + " >&-"], cwd=self.folder,
                                  stderr=subprocess.DEVNULL)
            self.assertEqual(done.returncode, 4, command)
        self.run_it("audit", status=1)

    def test_a_closed_error_stream_changes_nothing(self):
        self.import_demo()
        command = f"'{PASSFET}' rank '{CARD}' --format csv"
        plain = subprocess.run(["sh", "-c", command], cwd=self.folder, stdout=subprocess.PIPE)
        closed = subprocess.run(["sh", "-c", command + " 2>&- <&-"], cwd=self.folder,
                                stdout=subprocess.PIPE)
        self.assertEqual((plain.returncode, plain.stdout), (closed.returncode, closed.stdout))

    def test_export_onto_a_full_disk_is_4_and_leaves_no_file(self):
        self.import_demo()
        (self.folder / "out").mkdir()
        (self.folder / "out" / "soa_points.csv.new").symlink_to("/dev/full")
        self.run_it("export", "out", status=4)
        self.assertEqual(list((self.folder / "out").iterdir()), [])

    def test_there_is_no_colour(self):
        self.import_demo()
        for environment in ({}, {"NO_COLOR": "1"}, {"TERM": "xterm-256color"}):
            out, err = self.run_it("rank", CARD, environment=environment)
            self.assertNotIn("\x1b", out + err)

    def test_results_on_stdout_and_the_rest_on_stderr(self):
        out, err = self.run_it("import", *RATINGS)
        self.assertIn("44 new", out)
        self.assertIn("warning: ", err)
        self.assertNotIn("warning: ", out)


if __name__ == "__main__":
    main()
