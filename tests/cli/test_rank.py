"""What rank prints: table, CSV and JSON."""
import csv
import html.parser
import io
import json
import re
import shutil
import subprocess
import unicodedata

from support import CARD, DEMO, SOURCE, CommandTest, main

CARDS = [DEMO / f"{name}.csv" for name in ("line_card_48v", "accelerator_card_12v",
                                           "drive_controller_24v")]
PART_KEYS = ["rank", "part", "maker", "package", "verdict", "soa_margin", "limiting_event",
             "conduction_loss_W", "running_junction_C", "peak_junction_C", "reasons", "remarks",
             "events"]
EVENT_KEYS = ["event", "soa_margin", "start_C", "peak_junction_C", "worst_time_s", "corner"]


def width(text):
    return sum(0 if unicodedata.combining(c) else 1 for c in text)


class Table(CommandTest):
    def table(self, *arguments, status=0):
        out, _ = self.run_it("rank", *arguments, status=status)
        for line in out.splitlines():
            self.assertLessEqual(width(line), 100, line)
            self.assertEqual(line, line.rstrip())
        return out

    def test_no_line_is_wider_than_100_columns(self):
        self.import_demo()
        for cards in ([c] for c in CARDS):
            self.table(*cards)
        self.table(*CARDS, status=1)

    def test_long_names_are_cut_with_an_ellipsis(self):
        long = "Ω" * 30 + "L" * 100
        self.import_parts({"part": long, "maker": long, "package": long})
        self.assertIn("Ω…", self.table(self.card()))

    def test_the_head_repeats_the_decisive_values_with_the_sign_as_entered(self):
        self.import_demo()
        out = self.table(CARD)
        for words in ("-40.5 V .. -57 V", "176 uF .. 264 uF", "power_limit", "5 A .. 6 A",
                      "8 ms .. 12 ms", "required margin     1.3", "-43 V"):
            self.assertIn(words, out)

    def test_the_counts_are_those_of_the_rows(self):
        self.import_demo()
        out = self.table(CARD)
        found = [line[5:].split()[3] for line in out.splitlines()
                 if line[:4].strip(" +").isdigit() and line[4] == " "]
        self.assertIn(f"44 parts: {found.count('pass')} pass, {found.count('unassessed')} "
                      f"unassessed, {found.count('fail')} fail", out)

    def test_a_fail_names_the_number_that_failed_it(self):
        self.import_parts({"part": "LOW", "vds_max [V]": "12", "soa": "1ms 1:400 12:8"})
        self.assertIn("V_DS 13.2 V, allowed 9.6 V", self.table(self.card(), status=1))

    def test_an_unassessed_part_names_what_is_missing(self):
        self.import_parts({"part": "BARE", "soa": "", "id_pulse [A]": ""})
        out = self.table(self.card(), status=1)
        self.assertIn("unassessed", out)
        self.assertIn("no SOA points are stated", out)

    def test_a_stall_stands_at_the_head_with_its_numbers(self):
        self.import_parts({})
        out = self.table(self.card(start_load_current=",6,,A"), status=1)
        self.assertLess(out.index("THE CARD DOES NOT START"), out.index("1 part:"))

    def test_the_cautions_are_at_the_foot(self):
        self.import_demo()
        foot = self.table(CARD).splitlines()[-5:]
        for words in ("not an approval", "typical or calculated", "bench", "store energy",
                      "Qualified people", "local electrical"):
            self.assertIn(words, " ".join(foot))

    def test_the_database_revision_is_named(self):
        self.import_demo()
        self.assertRegex(self.table(CARD), r"revision 1-[0-9a-f]{8}")

    def test_a_rule_from_memory_says_so_and_a_published_one_does_not(self):
        self.import_parts({})
        memory = self.table(self.card(derating=",nasa-eee-inst-002,,"))
        self.assertIn("quoted from memory", memory)
        self.assertNotIn("memory", self.table(self.card(derating=",mil-dtl-917,,")))

    def test_a_rule_file_of_the_users_own_replaces_a_built_in_rule(self):
        self.import_parts({})
        card = self.card(derating=",mil-dtl-917,,")
        rules = self.write("r.csv", "rule,parameter,factor,clause,mark\n"
                           "mil-dtl-917,voltage_use,0.1,ours,house rule\n")
        out = self.table(card, "--derating", rules, status=1)
        self.assertIn("V_DS 13.2 V, allowed 10 V", out)

    def test_the_same_inputs_give_the_same_bytes(self):
        self.import_demo()
        for form in ("table", "csv", "json"):
            first = self.run_it("rank", CARD, "--format", form)[0]
            self.assertEqual(first, self.run_it("rank", CARD, "--format", form)[0])
            self.assertEqual(first, self.run_it("rank", CARD, "--format", form, "--threads", 3)[0])

    def test_the_locale_changes_nothing(self):
        self.import_demo()
        plain = self.run_it("rank", CARD, "--format", "csv")[0]
        for name in ("de_DE.UTF-8", "de_DE.utf8"):
            local = {"LC_ALL": name, "LANG": name}
            self.assertEqual(plain, self.run_it("rank", CARD, "--format", "csv",
                                                environment=local)[0])

    def test_sort_top_and_where_choose_rows(self):
        self.import_demo()
        rows = self.rows(CARD, "--where", "package=TOX8", "--where", "vds_max>=100 V")
        self.assertEqual({r["package"] for r in rows}, {"TOX8"})
        losses = [float(r["conduction_loss_W"]) for r in self.rows(CARD, "--sort", "loss")
                  if r["verdict"] == "pass"]
        self.assertEqual(losses, sorted(losses))
        self.assertEqual(len(self.rows(CARD, "--top", "3")), 3)
        self.assertEqual(self.rows(CARD, "--top", "3"), self.rows(CARD)[:3])

    def rows(self, *arguments):
        out, _ = self.run_it("rank", *arguments, "--format", "csv")
        self.assertTrue(out.endswith("\r\n"))
        return list(csv.DictReader(io.StringIO(out, newline="")))


class Csv(CommandTest):
    def test_cells_that_a_spreadsheet_would_run_are_defused(self):
        self.import_parts({"part": "=1+2", "maker": '@A"B', "package": "+9"})
        out, _ = self.run_it("rank", self.card(), "--format", "csv")
        row = next(csv.DictReader(io.StringIO(out, newline="")))
        self.assertEqual((row["part"], row["maker"], row["package"]), ("'=1+2", "'@A\"B", "'+9"))

    def test_what_is_not_stated_is_an_empty_cell(self):
        self.import_parts({"part": "BARE", "soa": "", "zth": "", "maker": ""})
        out, _ = self.run_it("rank", self.card(), "--format", "csv", status=1)
        row = next(csv.DictReader(io.StringIO(out, newline="")))
        self.assertEqual((row["soa_margin"], row["maker"], row["verdict"]), ("", "", "unassessed"))


class Json(CommandTest):
    def rank(self, *arguments, status=0):
        out, _ = self.run_it("rank", *arguments, "--format", "json", status=status)
        if shutil.which("jq"):
            subprocess.run(["jq", "-e", "."], input=out.encode(), stdout=subprocess.DEVNULL,
                           check=True)
        return json.loads(out, parse_constant=self.fail)

    def test_it_holds_the_keys_of_the_manual(self):
        self.import_demo()
        for card in CARDS:
            answer = self.rank(card)
            self.assertLessEqual({"name", "required_margin", "stall"}, set(answer["profile"]))
            for part in answer["parts"]:
                self.assertLessEqual(set(PART_KEYS), set(part))
                self.assertIn(part["verdict"], ("pass", "fail", "unassessed"))
                for event in part["events"]:
                    self.assertLessEqual(set(EVENT_KEYS), set(event))

    def test_the_margin_of_a_part_is_the_smallest_of_its_events(self):
        self.import_demo()
        for part in self.rank(CARD)["parts"]:
            margins = [e["soa_margin"] for e in part["events"] if e["soa_margin"] is not None]
            self.assertEqual(part["soa_margin"], min(margins, default=None))
            if margins:
                limiting = next(e for e in part["events"] if e["event"] == part["limiting_event"])
                self.assertEqual(limiting["soa_margin"], part["soa_margin"])

    def test_ranks_and_verdicts_are_in_order(self):
        self.import_demo()
        parts = self.rank(CARD)["parts"]
        self.assertEqual([p["rank"] for p in parts], list(range(1, 45)))
        order = [["pass", "unassessed", "fail"].index(p["verdict"]) for p in parts]
        self.assertEqual(order, sorted(order))

    def test_a_corner_has_the_sign_as_entered(self):
        self.import_demo()
        for part in self.rank(CARD, "--top", "3")["parts"]:
            for event in part["events"]:
                if "supply_voltage" in event["corner"]:
                    self.assertIn(event["corner"]["supply_voltage"], (-40.5, -57))

    def test_what_cannot_be_worked_out_is_null_and_never_a_pass(self):
        self.import_parts({"part": "BARE", "soa": "", "zth": "", "maker": ""})
        part = self.rank(self.card(), status=1)["parts"][0]
        self.assertEqual((part["soa_margin"], part["maker"], part["verdict"]),
                         (None, None, "unassessed"))
        self.assertTrue(part["reasons"])

    def test_thermal_runaway_is_null_with_a_reason(self):
        self.import_parts({"part": "HOT", "rdson_max @ 10 V [mOhm]": "900"})
        part = self.rank(self.card(running_current=",20,,A", current_limit=",40,,A"),
                         status=1)["parts"][0]
        self.assertIsNone(part["running_junction_C"])
        self.assertEqual(part["verdict"], "fail")
        self.assertIn("runaway", " ".join(part["reasons"]))

    def test_a_stall_is_told_as_text(self):
        self.import_parts({})
        answer = self.rank(self.card(start_load_current=",6,,A"), status=1)
        self.assertIsInstance(answer["profile"]["stall"], str)
        self.assertIsNone(self.rank(self.card())["profile"]["stall"])

    def test_texts_are_valid_unicode_whatever_they_hold(self):
        name = 'a"b\\c/é→\u2028'
        self.import_parts({"part": name})
        self.assertEqual(self.rank(self.card())["parts"][0]["part"], name)

    def test_several_profiles_give_the_worst_over_all(self):
        self.import_demo()
        single = [{p["part"]: p for p in self.rank(c)["parts"]} for c in CARDS]
        answer = self.rank(*CARDS, status=1)
        self.assertEqual([p["name"] for p in answer["profiles"]], [c.stem for c in CARDS])
        for part in answer["parts"]:
            self.assertEqual(len(part["cards"]), 3)
            verdicts = [s[part["part"]]["verdict"] for s in single]
            self.assertEqual([c["verdict"] for c in part["cards"]], verdicts)
            worst = max(verdicts, key=["pass", "unassessed", "fail"].index)
            self.assertEqual(part["verdict"], worst)
            margins = [s[part["part"]]["soa_margin"] for s in single]
            known = [m for m in margins if m is not None]
            self.assertEqual(part["soa_margin"], min(known, default=None))

    def test_a_capture_is_an_event_of_its_own(self):
        self.import_parts({})
        capture = self.write("plug.csv", "time [ms],vds [V],id [A]\n0,12,0\n0.1,12,5\n2,0.1,5\n")
        events = self.rank(self.card(), "--capture", capture)["parts"][0]["events"]
        self.assertEqual([e["capture"] for e in events if e["event"] == "recorded"], ["plug"])

    def test_reviewed_ranks_accepted_ratings_only_and_others_are_marked(self):
        self.import_parts({}, {"part": "T2"})
        self.run_it("review", "T2", "--accept", "--by", "bob")
        remarks = {p["part"]: " ".join(p["remarks"]) for p in self.rank(self.card())["parts"]}
        self.assertIn("not yet reviewed", remarks["T1"])
        self.assertNotIn("not yet reviewed", remarks["T2"])
        reviewed = self.rank(self.card(), "--reviewed")["parts"]
        self.assertEqual([p["part"] for p in reviewed], ["T2"])

    def test_as_of_ranks_with_what_was_known_then(self):
        self.import_parts({})
        self.assertEqual(self.rank(self.card(), "--as-of", "2001-01-01", status=1)["parts"], [])

    def test_the_signs_of_a_p_channel_sheet_change_nothing(self):
        plain = {"polarity": "P"}
        signed = {"polarity": "P", "part": "T2", "vds_max [V]": "-100", "id_cont [A]": "-100",
                  "id_pulse [A]": "-400", "soa": "1ms -1:-400 -10:-100 -80:-8 | "
                  "10ms -1:-400 -10:-60 -80:-4 | dc -1:-100 -10:-10 -80:-0.6"}
        self.import_parts(plain, signed)
        one, two = self.rank(self.card(polarity=",P,,"))["parts"]
        self.assertEqual(one["verdict"], "pass")
        for part in (one, two):
            del part["rank"], part["part"]
        self.assertEqual(one, two)

    def test_a_banned_part_never_passes(self):
        self.import_parts({"status": "banned", "status_reason": "burnt two boards"})
        part = self.rank(self.card(), status=1)["parts"][0]
        self.assertEqual(part["verdict"], "fail")


class Balanced(html.parser.HTMLParser):
    """Notes tags that close another one than the last opened, and references to other places."""
    EMPTY = {"meta", "rect", "line", "circle", "polyline", "br"}

    def __init__(self):
        super().__init__()
        self.open, self.faults, self.ids = [], [], []

    def handle_starttag(self, tag, attributes):
        named = dict(attributes)
        self.ids += [named["id"]] if "id" in named else []
        self.faults += [n for n in ("src", "href", "onload", "onclick") if n in named]
        self.faults += [tag] if tag in ("script", "link", "img", "iframe") else []
        if tag not in self.EMPTY:
            self.open.append(tag)

    def handle_endtag(self, tag):
        if tag not in self.EMPTY and (not self.open or self.open.pop() != tag):
            self.faults.append(f"/{tag}")


class Page(CommandTest):
    def page(self, *arguments, status=0):
        self.run_it("rank", *arguments, "--report", "page.html", status=status)
        text = (self.folder / "page.html").read_text()
        seen = Balanced()
        seen.feed(text)
        self.assertEqual((seen.open, seen.faults), ([], []))
        self.assertEqual(len(seen.ids), len(set(seen.ids)))
        self.assertNotIn("url(http", text)
        self.assertNotIn("nan", re.sub(r"<[^>]*>", "", text).lower().split())
        return text

    def test_it_is_complete_in_itself_and_well_formed(self):
        self.import_demo()
        for card in CARDS:
            text = self.page(card)
            self.assertEqual(text.count("<svg") + text.count("no safe operating area."), 10)
            self.assertIn("not an approval", text)
        self.page(*CARDS, status=1)

    def test_top_says_how_many_parts_are_shown_in_full(self):
        self.import_demo()
        self.assertEqual(self.page(CARD, "--top", "3").count("<svg"), 3)

    def test_it_shows_the_line_widths_and_the_margin(self):
        self.import_demo()
        text = self.page(CARD)
        part = json.loads(self.run_it("rank", CARD, "--format", "json")[0])["parts"][0]
        self.assertIn(part["part"], text)
        self.assertIn(f"{part['soa_margin']:.3g}", text)
        for words in ("DC</text>", "10 us</text>", "-40.5 V .. -57 V"):
            self.assertIn(words, text)

    def test_every_stress_in_a_plot_has_a_number_that_the_plot_explains(self):
        self.import_demo()
        for plot in re.findall(r"<svg.*?</svg>", self.page(CARD), re.S):
            groups = re.findall(r'<g class="number"><text[^>]*>([^<]*)</text>', plot)
            shapes = plot.count('class="stress"') + bool(re.search(r'class="step"', plot))
            self.assertGreaterEqual(len(groups), shapes)
            numbers = [number for group in groups for number in group.split(", ")]
            key = re.findall(r"(\d+) (?:start_up|short_\w+|trip|retry|supply_step)", plot)
            self.assertEqual(sorted(numbers), sorted(key))

    def test_stress_that_could_not_be_worked_out_is_a_dash_and_not_0(self):
        self.import_parts({"rdson_max @ 10 V [mOhm]": ""})
        self.assertNotRegex(self.page(self.card(), status=1), r">0( [VAJsm]+)?</td>")
        out, _ = self.run_it("explain", "T1", self.card(), status=1)
        for event in ("start_up", "short_at_start", "short_running"):
            self.assertRegex(out, rf"\n  {event}( +-){{10}}\n")

    def test_foreign_texts_stay_texts(self):
        self.import_parts({"part": "<b>&\"x", "maker": "<script>"})
        self.assertIn("&lt;script&gt;", self.page(self.card()))

    def test_a_part_without_soa_says_so(self):
        self.import_parts({"soa": ""})
        self.assertIn("states no safe operating area", self.page(self.card(), status=1))

    def test_a_page_that_cannot_be_written_is_4_and_leaves_no_file(self):
        self.import_demo()
        self.run_it("rank", CARD, "--report", "no/such/folder/p.html", status=4)
        (self.folder / "p.html.new").symlink_to("/dev/full")
        self.run_it("rank", CARD, "--report", "p.html", status=4)
        self.assertEqual(list(self.folder.glob("p.html*")), [])


if __name__ == "__main__":
    main()
