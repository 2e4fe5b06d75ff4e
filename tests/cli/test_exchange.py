"""Ratings in and out: import, export, history, review, undo, backup, another database."""
import random
import sqlite3

from support import CARD, RATINGS, CommandTest, main, parts_csv

FILES = ["parts.csv", "soa_points.csv", "zth_points.csv", "foster.csv"]


class RoundTrip(CommandTest):
    def export(self, database, folder):
        self.run_it("--db", database, "export", folder)
        return [(self.folder / folder / name).read_bytes() for name in FILES]

    def assert_comes_back(self, *options):
        """Export, import, export: the same bytes, and ratings that rank the same."""
        first = self.export("passfet.db", "one")
        self.run_it("--db", "two.db", "import", *options, *[f"one/{name}" for name in FILES])
        self.assertEqual(first, self.export("two.db", "two"))
        table = self.run_it("export")[0]
        self.write("table.csv", table)
        self.run_it("--db", "three.db", "import", *options, "table.csv")
        self.assertEqual(table, self.run_it("--db", "three.db", "export")[0])
        shown = [self.run_it("--db", base, "parts", "--format", "json")[0].replace(" ", "")
                 for base in ("passfet.db", "two.db", "three.db")]
        facts = '"revision":', '"entry":', '"time":', '"author":'
        kept = [[line for line in text.splitlines() if not line.startswith(facts)]
                for text in shown]
        self.assertEqual(kept[0], kept[1])
        self.assertEqual(kept[0], kept[2])

    def test_the_demo_ratings_come_back_unchanged(self):
        self.import_demo()
        self.assert_comes_back()
        rows = [self.run_it("--db", base, "rank", CARD, "--format", "csv")[0]
                for base in ("passfet.db", "two.db")]
        self.assertEqual(*rows)

    def test_texts_of_every_kind_come_back_unchanged(self):
        texts = ["=1+1", "+x", "-x y", "@x", "'=1", "''", "'x", "#x", 'a"b', "a,b;c\td", "a\nb",
                 "sep=;", "é→Ω", "x'", "1,234", "0x10"]
        self.import_parts(*({"part": f"T{i}", "note": text, "maker": text.replace("\n", " ").replace("\t", " ")}
                            for i, text in enumerate(texts)))
        notes = self.run_it("parts", "--format", "json")[0]
        self.assertIn('"note": "=1+1"', notes)
        self.assert_comes_back()

    def test_every_form_of_curve_comes_back_unchanged(self):
        self.import_parts({}, {"part": "T2", "zth": "", "soa": ""},
                          {"part": "T3", "soa_case_temperature": "75", "zth":
                           "case foster 0.1:70us 0.4:1ms | ambient 1ms:0.1 1s:2 1000s:40"})
        self.write("soa.csv", "part,pulse,vds [V],id [A],case_temperature [degC]\n"
                   "T2,1ms,1,400,25\nT2,1ms,80,8,25\nT2,1ms,80,4,25\nT2,dc,1,90,25\nT2,dc,80,.5,25\n"
                   "T2,1ms,1,200,100\nT2,1ms,80,3,100\nT2,dc,1,80,-20\nT2,dc,80,.4,-20\n")
        self.write("foster.csv", "part,foster_r [K/W],foster_tau [s]\nT2,0.1,0.001\nT2,0.4,0.1\n")
        self.run_it("import", "--accept", "soa.csv", "foster.csv")
        self.assert_comes_back("--accept")

    def test_random_parts_come_back_unchanged(self):
        chance = random.Random(5)

        def draw(low, high):
            return repr(low * (high / low) ** chance.random())

        def part(i):
            vds = float(draw(20, 200))
            amps = [400 * chance.random() + 1 for _ in range(3)]
            soa = " | ".join(f"{pulse} 1:{a!r} {vds * 0.9!r}:{a / vds / 9!r}" for pulse, a in
                             zip(("1ms", "10ms", "dc"), sorted(amps, reverse=True)))
            return {"part": f"R{i}", "vds_max [V]": repr(vds), "rdson_max @ 10 V [mOhm]": draw(1, 90),
                    "price": draw(0.1, 9), "rth_jc [K/W]": draw(0.2, 3), "soa": soa,
                    "id_pulse [A]": "" if i % 3 else "900", "zth": ""}
        self.import_parts(*map(part, range(2000)))
        self.assert_comes_back("--accept")

    def test_where_exports_a_part_of_it(self):
        self.import_demo()
        out, _ = self.run_it("export", "out", "--where", "package=TOX8")
        self.assertIn("8 parts", out)
        self.run_it("--db", "two.db", "import", *[f"out/{name}" for name in FILES])


class Import(CommandTest):
    def dump(self):
        base = sqlite3.connect(self.folder / "passfet.db")
        return list(base.iterdump())

    def test_every_problem_of_a_run_is_told_with_its_place(self):
        bad = parts_csv({"vds_max [V]": "-"}, {"part": "T2", "tj_max [degC]": "17x"},
                        {"part": "T3", "polarity": "Q"})
        worse = "part,pulse,vds,id\nT1,1ms,1V\n"
        out, err = self.run_it("import", self.write("a.csv", bad), self.write("b.csv", worse),
                               status=3)
        for place in ("a.csv:2: vds_max [V]: ", "a.csv:3: tj_max [degC]: 17x: ",
                      "a.csv:4: polarity: Q: ", "b.csv:2: "):
            self.assertIn(place, err)
        self.assertIn("Nothing was stored", out)

    def test_one_bad_file_leaves_the_database_as_it_was(self):
        self.import_demo()
        before = self.dump()
        good = self.write("good.csv", parts_csv({}))
        bad = self.write("bad.csv", parts_csv({"part": "T2", "polarity": "Q"}))
        self.run_it("import", good, bad, status=3)
        self.run_it("import", good, "--dry-run")
        self.assertEqual(before, self.dump())

    def test_the_same_files_again_change_nothing(self):
        self.import_demo()
        before = self.dump()
        self.assertIn("already imported as number 1", self.run_it("import", *RATINGS)[0])
        self.assertIn("No change", self.run_it("import", *RATINGS[::-1])[0])
        self.assertEqual(before, self.dump())

    def test_a_repeat_tells_of_parts_that_were_changed_since(self):
        first = self.write("a.csv", parts_csv({"price": "1"}))
        self.run_it("import", first)
        self.assertNotIn("by now", self.run_it("import", first)[0])
        self.run_it("import", self.write("b.csv", parts_csv({"price": "2"})))
        out, _ = self.run_it("import", first)
        self.assertIn("already imported as number 1", out)
        self.assertIn("1 of its parts states something else by now", out)
        self.run_it("undo", "2")
        self.assertNotIn("by now", self.run_it("import", first)[0])

    def test_a_blank_cell_that_takes_curves_away_is_warned_of(self):
        self.import_parts({}, {"part": "T2"})
        _, err = self.run_it("import", self.write("b.csv", parts_csv({"soa": ""})))
        self.assertIn("b.csv:2: soa: T1: a blank cell takes away the SOA stated before", err)
        self.assertEqual(err.count("takes away"), 1)
        _, err = self.run_it("import", self.write("b.csv", parts_csv({"soa": "", "price": "3"})))
        self.assertNotIn("takes away", err)

    def test_two_databases_of_the_same_files_state_the_same_whoever_made_them(self):
        for name, why in (("one", "first"), ("two", "second")):
            self.run_it("--db", name + ".db", "import", *RATINGS, "--by", name, "--why", why)
        self.assertEqual(*[self.run_it("--db", name + ".db", "export")[0]
                           for name in ("one", "two")])

    def test_a_dry_run_shows_text_and_value_of_every_cell(self):
        self.write("p.csv", parts_csv({}))
        out, _ = self.run_it("import", "p.csv", "--dry-run")
        self.assertIn("p.csv:2: T1: rdson_max @ 10 V [mOhm]: `2` -> 2 mOhm", out)
        self.assertFalse((self.folder / "passfet.db").exists())

    def test_a_dash_reads_standard_input(self):
        out, _ = self.run_it("import", "-", text_in=parts_csv({}))
        self.assertIn("1 new", out)

    def test_keep_good_stores_the_good_and_returns_the_bad(self):
        text = parts_csv({}, {"part": "T2", "polarity": "Q"})
        self.run_it("import", self.write("p.csv", text), "--keep-good", "bad.csv", status=1)
        bad = (self.folder / "bad.csv").read_text()
        self.assertIn("refused because", bad.splitlines()[0])
        self.assertIn("T2", bad)
        self.assertNotIn("T1", bad)
        self.run_it("show", "T1")

    def test_the_file_of_bad_rows_can_be_put_right_and_imported(self):
        text = parts_csv({"note": "", "tj_max [degC]": "17x"},
                         {"part": "T2", "polarity": "P", "vds_max [V]": "-100 V", "note": "=1+1",
                          "tj_max [degC]": "17x"}, {"part": "T3", "polarity": "Q"})
        self.run_it("import", self.write("p.csv", text), "--keep-good", "bad.csv", status=3)
        bad = (self.folder / "bad.csv").read_text()
        self.assertNotRegex(bad, r'(^|,)"?[=+-]')
        right = bad.replace("17x", "175").replace(",Q,", ",N,")
        self.run_it("import", self.write("right.csv", right))
        self.assertIn("100 V", self.run_it("show", "T2")[0])
        self.assertIn(" =1+1", self.run_it("show", "T2")[0])

    def test_a_map_and_decimal_commas_are_taken(self):
        self.write("map.csv", "theirs,ours\nSachnummer,part\nKanal,polarity\nUds,vds_max [V]\n"
                   "Tj,tj_max [degC]\n")
        self.write("p.csv", "Sachnummer;Kanal;Uds;Tj\nX1;N;30,5;150\n")
        self.run_it("import", "p.csv", "--map", "map.csv")
        self.assertIn("30.5 V", self.run_it("show", "X1")[0])

    def test_no_progress_line_where_there_is_no_terminal(self):
        _, err = self.run_it("import", *RATINGS)
        self.assertNotIn("\r", err)


class History(CommandTest):
    def test_a_change_is_told_with_author_reason_and_source(self):
        self.import_parts({})
        self.run_it("import", self.write("new.csv", parts_csv({"vds_max [V]": "90"})),
                    "--by", "bob", "--why", "sheet revision C")
        out, _ = self.run_it("history", "T1")
        for words in ("Revision 2", "by bob", "sheet revision C", "new.csv", "vds_max: 100 V -> 90 V"):
            self.assertIn(words, out)

    def test_a_second_person_accepts_and_a_change_asks_again(self):
        self.import_parts({})
        self.run_it("review", "T1", "--accept", "--by", "ann", status=3)
        self.run_it("review", "T1", "--accept", "--by", "bob", "--why", "read it twice")
        self.assertIn("accepted", self.run_it("show", "T1")[0])
        self.assertIn("read it twice", self.run_it("history", "T1")[0])
        self.run_it("import", self.write("new.csv", parts_csv({"vds_max [V]": "90"})))
        self.assertIn("unreviewed", self.run_it("show", "T1")[0])

    def test_undo_gives_back_what_was_stated_before(self):
        self.import_parts({})
        before = self.run_it("parts", "--format", "csv")[0]
        self.run_it("import", self.write("new.csv", parts_csv({"vds_max [V]": "90"})))
        self.run_it("undo", "2", "--by", "bob", "--why", "wrong column")
        self.assertEqual(before, self.run_it("parts", "--format", "csv")[0])
        self.assertIn("wrong column", self.run_it("history", "T1")[0])

    def test_a_backup_ranks_the_same_and_never_overwrites(self):
        self.import_demo()
        self.run_it("backup", "copy.db")
        rows = [self.run_it("--db", base, "rank", CARD, "--format", "csv")[0]
                for base in ("passfet.db", "copy.db")]
        self.assertEqual(*rows)
        self.run_it("backup", "copy.db", status=4)

    def test_another_database_is_taken_and_conflicts_need_a_word(self):
        self.import_parts({})
        self.run_it("backup", "other.db")
        self.run_it("import", self.write("a.csv", parts_csv({"price": "1"})))
        self.run_it("--db", "other.db", "import", self.write("b.csv", parts_csv({"price": "2"})))
        out, err = self.run_it("import", "other.db", status=3)
        self.assertIn("price: ours 1, theirs 2", out)
        self.assertIn("prefer", err)
        self.run_it("import", "other.db", "--prefer", "theirs")
        self.assertRegex(self.run_it("show", "T1")[0], r"price +2 ")


if __name__ == "__main__":
    main()
