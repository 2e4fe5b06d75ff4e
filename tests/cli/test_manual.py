"""Options, --help and the manual agree; what the README shows is what the program does; links lead on.

With --write behind the two usual arguments the section COMMANDS of docs/passfet.1 is written anew.
"""
import re
import shutil
import subprocess
import sys

from support import PASSFET, SOURCE, CommandTest, main

PAGE = SOURCE / "docs" / "passfet.1"
BEGIN, END = '.\\" commands begin\n', '.\\" commands end\n'


def helped(*command):
    return subprocess.run([PASSFET, *command, "--help"], capture_output=True, text=True,
                          check=True).stdout


def command_names():
    """From the table of commands in --help."""
    return re.findall(r"^  (\w+) {2,}\S", helped(), re.M)


def described(name):
    """(usage, summary, [(option, argument or None, meaning)]) of a command."""
    usage, summary, options = helped(name).rstrip("\n").split("\n\n")
    found = re.findall(r"^  --(\S+)(?: (\S+))? +(\S.*)$", options, re.M)
    return usage, summary, [(o, a or None, m) for o, a, m in found]


def escaped(text):
    return text.replace("\\", "\\e").replace("-", "\\-").replace("'", "\\(aq")


def roff_operands(text):
    return re.sub(r"[A-Z]+", lambda word: f"\\fI{word[0]}\\fR", text)


def section(name):
    usage, summary, options = described(name)
    operands = usage.split("[OPTION]...", 1)[1].strip()
    lines = [f".SS {name} {roff_operands(operands)}".rstrip(), escaped(summary)]
    for option, argument, meaning in options:
        lines.append(".TP")
        lines.append(f'.BI \\-\\-{escaped(option)} " {argument}"' if argument
                     else f".B \\-\\-{escaped(option)}")
        lines.append(escaped(meaning))
    return "\n".join(lines) + "\n"


def sections():
    return "".join(section(name) for name in command_names())


class Manual(CommandTest):
    def test_the_manual_holds_every_command_and_option_in_the_words_of_help(self):
        page = PAGE.read_text()
        between = page[page.index(BEGIN) + len(BEGIN):page.index(END)]
        self.assertEqual(between, sections())

    def test_every_option_of_the_help_is_taken(self):
        for name in command_names():
            usage, _, options = described(name)
            self.assertTrue(options, name)
            for option, argument, _ in options:
                if option == "help":
                    continue
                value = [f"--{option}", "x"] if argument else [f"--{option}"]
                done = self.start(name, *value, "--help", capture_output=True)
                self.assertEqual(done.returncode, 0, (name, option))
            self.run_it(name, "--no-such-option", status=2)

    def test_it_renders_without_a_warning(self):
        if not shutil.which("man"):
            self.skipTest("no man here")
        done = subprocess.run(["man", "--warnings", "-l", str(PAGE)], capture_output=True, text=True,
                              env={"PATH": "/usr/bin:/bin", "MANWIDTH": "80", "LC_ALL": "C.UTF-8"})
        self.assertEqual((done.returncode, done.stderr), (0, ""))
        self.assertIn("EXIT STATUS", done.stdout)

    def test_the_exit_statuses_are_those_of_the_help(self):
        listed = re.findall(r"^\.B (\d)$", PAGE.read_text(), re.M)
        self.assertEqual(listed, re.findall(r"(?<![\d.])(\d) [a-z]", helped().split("Exit status")[1]))


class Readme(CommandTest):
    """A block of lines that begin with build/passfet is run; a `text` block behind it is its output."""

    def blocks(self):
        """(kind, text) of every fenced block."""
        return re.findall(r"^```(\w*)\n(.*?)^```", (SOURCE / "README.md").read_text(), re.M | re.S)

    def prepare(self):
        (self.folder / "build").mkdir()
        (self.folder / "build" / "passfet").symlink_to(PASSFET)
        (self.folder / "data").symlink_to(SOURCE / "data")

    def run_block(self, text):
        """The output of the last command; each ends with 0, or with 1 for an answer that is no."""
        for command in text.replace("\\\n", " ").splitlines():
            done = subprocess.run(["sh", "-c", command], cwd=self.folder, capture_output=True, text=True)
            self.assertIn(done.returncode, (0, 1), f"{command}\n{done.stderr}")
        return done.stdout

    def test_what_it_shows_is_what_the_program_prints(self):
        self.prepare()
        changing = re.compile(r"revision \d+-[0-9a-f]{8}")
        said, compared = None, 0
        for kind, text in self.blocks():
            if text.startswith("build/passfet"):
                said = self.run_block(text)
            elif kind == "text" and said:
                self.assertEqual(changing.sub("*", text), changing.sub("*", said))
                said, compared = None, compared + 1
        self.assertGreater(compared, 0)


class Links(CommandTest):
    def test_every_link_of_the_documents_leads_to_a_file(self):
        pages = [SOURCE / "README.md", SOURCE / "DEVELOPERS.md", SOURCE / "data" / "README.md",
                 *(SOURCE / "docs").rglob("*.md")]
        for page in pages:
            for target in re.findall(r"\]\(([^)#\s]+)[^)]*\)", page.read_text()):
                if "://" not in target:
                    self.assertTrue((page.parent / target).exists(), f"{page}: {target}")


def write():
    page = PAGE.read_text()
    head, tail = page[:page.index(BEGIN) + len(BEGIN)], page[page.index(END):]
    PAGE.write_text(head + sections() + tail)


if __name__ == "__main__":
    if "--write" in sys.argv[3:]:
        write()
    else:
        main()
