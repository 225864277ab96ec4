"""Files, pipes and exit statuses of the command. Usage: files_test.py CAPSIGH TOP"""
import json
import os
import pathlib
import subprocess
import sys
import tempfile

capsigh, top = sys.argv[1], pathlib.Path(sys.argv[2])
can = (top / "scenarios/sparkling-water-can.toml").read_bytes()
failures = []
checked = 0


def run(*arguments, stdin=b"", as_user=None, **more):
    def drop():
        os.setgid(as_user)
        os.setuid(as_user)
    return subprocess.run([capsigh, *map(str, arguments)], input=stdin, capture_output=True, timeout=60,
                          preexec_fn=drop if as_user else None, **more)


def check(name, condition, done=None):
    global checked
    checked += 1
    if not condition:
        failures.append(name + ("" if done is None else f": exit {done.returncode}, {done.stderr[:300]!r}"))


with tempfile.TemporaryDirectory() as scratch:
    os.chmod(scratch, 0o755)
    scratch = pathlib.Path(scratch)
    done = run("report", scratch / "none.toml")
    check("a missing file exits 3", done.returncode == 3 and b"No such file" in done.stderr, done)
    done = run("report", scratch)
    check("a directory exits 3", done.returncode == 3 and b"Is a directory" in done.stderr, done)
    secret = scratch / "secret.toml"
    secret.write_bytes(can)
    secret.chmod(0)
    nobody = 65534
    if os.getuid() == 0:
        # The build may lie where nobody may not go: run a copy.
        program = scratch / "capsigh"
        program.write_bytes(pathlib.Path(capsigh).read_bytes())
        program.chmod(0o755)
        done = subprocess.run([str(program), "report", str(secret)], capture_output=True,
                              preexec_fn=lambda: (os.setgid(nobody), os.setuid(nobody)))
    else:
        done = run("report", secret)
    check("no permission exits 3", done.returncode == 3 and b"Permission denied" in done.stderr, done)

    (scratch / "binary.toml").write_bytes(pathlib.Path(capsigh).read_bytes()[:4096])
    done = run("report", scratch / "binary.toml")
    check("a binary exits 2", done.returncode == 2 and done.stderr.count(b"error:") == 1, done)
    (scratch / "c3.toml").write_bytes(b"title = \"\xc3")
    done = run("report", scratch / "c3.toml")
    check("a lone 0xC3 exits 2", done.returncode == 2 and b"0xC3" in done.stderr, done)
    (scratch / "deep.toml").write_bytes(b"a = " + b"[\n" * 20000)
    done = run("report", scratch / "deep.toml")
    check("deep nesting exits 2", done.returncode == 2 and b"deeper" in done.stderr, done)
    (scratch / "long.toml").write_bytes(b"# x\n" * 100000)
    done = run("report", scratch / "long.toml")
    check("a long file exits 2", done.returncode == 2 and b"bytes" in done.stderr, done)

    plain = run("report", "-", "--as", "json", stdin=can)
    check("standard input is read; a target met exits 0", plain.returncode == 0, plain)
    for name, text in (("BOM", b"\xef\xbb\xbf" + can), ("CRLF", can.replace(b"\n", b"\r\n"))):
        done = run("report", "-", "--as", "json", stdin=text)
        check(name + " is read", done.returncode == 0, done)
        a, b = json.loads(plain.stdout), json.loads(done.stdout)
        a.pop("audit"), b.pop("audit")
        check(name + " reads the same", a == b)

    two = run("report", scratch / "none.toml", "-", stdin=can)
    check("a missing file among others exits 3", two.returncode == 3, two)
    both = run("report", "-", top / "scenarios/sparkling-water-can.toml", "--as", "json", stdin=can)
    check("several recipes give an array", len(json.loads(both.stdout)) == 2)

    out = scratch / "report.json"
    done = run("report", "-", "--as", "json", "--out", out, stdin=can)
    check("--out writes what standard output shows", out.read_bytes() == plain.stdout and not done.stdout)
    done = run("report", "-", "--out", scratch / "no/such/place", stdin=can)
    check("an --out that cannot be exits 3", done.returncode == 3, done)
    before = sorted(os.listdir(scratch))
    done = run("report", "-", "--out", scratch / "bad.txt", stdin=b"[contact]\n")
    check("nothing is written for a bad recipe", sorted(os.listdir(scratch)) == before, done)
    check("a bad recipe exits 2", done.returncode == 2, done)
    if os.path.exists("/dev/full"):
        with open("/dev/full", "wb") as full:
            done = subprocess.run([capsigh, "report", "-"], input=can, stdout=full, stderr=subprocess.PIPE)
        check("a full disk exits 3", done.returncode == 3 and b"No space" in done.stderr, done)

    for arguments in ([], ["reprot", "x"], ["report"], ["report", "--set", "x"], ["report", "-", "--units", "furlong"], ["report", "-", "--units", "psig"], ["report", "-", "--as", "pdf"], ["report", "-", "--nope"]):
        done = run(*arguments, stdin=can)
        check(f"usage {arguments} exits 2", done.returncode == 2 and done.stderr, done)
    check("--help exits 0", run("--help").returncode == 0)
    check("--version exits 0", run("--version").stdout.strip() == b"0.3.0")
    done = run("report", "-", "--trace", stdin=can)
    check("--trace shows records", b"henry.CO2.weiss1974" in done.stdout, done)
    sure = run("report", "-", "--set", "contact.pressure=1.62 bar gauge", "--set", "target.CO2={ min = \"3 vol\" }", stdin=can)
    check("a target met exits 0, and --set lies over the file", sure.returncode == 0, sure)
    unsure = run("report", "-", "--set", "target.CO2=3.7 vol +/- 0.05 vol", stdin=can)
    check("undecided exits 1", unsure.returncode == 1 and b"UNDECIDED" in unsure.stdout, unsure)
    over = run("report", "-", "--set", "container.rated=1 bar gauge", "--set", "target.CO2=3.7 vol", stdin=can)
    check("a rating below the package exits 1", over.returncode == 1 and b"DANGER" in over.stdout, over)
    order = run("report", "--set", "target.CO2=3.7 vol", top / "scenarios/sparkling-water-can.toml", "--units", "psi",
                top / "scenarios/lager.toml")
    check("options do not swallow recipes", order.returncode in (0, 1) and b"psi gauge" in order.stdout, order)
    line = run("report", "--set", 'liquid.like=beer', "--set", "liquid.basis=true", "--set",
               'contact.temperature="6 degC"', "--set", "contact.pressure=1 bar gauge")
    check("one line without a file", line.returncode == 0 and b"as tested, by ASBC" in line.stdout, line)
    shared = run("report", "-", "--with", top / "scenarios/shared/quillbeck.toml", "--as", "json",
                 stdin=b'[contact]\ntemperature = "4 degC"\npressure = "1 bar gauge"\n')
    check("--with lies under the recipe", abs(json.loads(shared.stdout)["condition"]["ambient"]["value"] - 97.19) < 0.01)
    hot = b'[contact]\ntemperature = "4 degC"\npressure = "12 bar gauge"\n'
    for option, bad in (("--seed", "abc"), ("--seed", "-1"), ("--seed", "1.5"), ("--monte-carlo", "many"),
                        ("--monte-carlo", "10"), ("--monte-carlo", "1e6"), ("--threads", "0")):
        done = run("report", "-", option, bad, stdin=can)
        check(f"{option} {bad} exits 2", done.returncode == 2 and b"whole number" in done.stderr, done)
    drawn = [run("report", "-", "--as", "json", "--monte-carlo", "3000", "--seed", seed, "--threads", threads,
                 stdin=can).stdout for seed, threads in (("7", "1"), ("7", "3"), ("8", "1"))]
    check("threads do not change what is drawn, the seed does", drawn[0] == drawn[1] != drawn[2])
    volumes = json.loads(drawn[0])["dissolved"]["CO2"]["volumes"]
    check("a drawn figure has its interval", volumes["low"] < volumes["value"] < volumes["high"]
          and abs(volumes["u"] / volumes["u_first_order"] - 1) < 0.1)
    check("a run without a terminal shows no progress",
          not run("report", "-", "--monte-carlo", "3000", stdin=can).stderr)
    contents = run("report", "-", "--units", "g/L,vol,mg", stdin=can)
    check("--units chooses the measure of contents", b" g/L = " in contents.stdout and b" mg\n" in contents.stdout)
    check("a caution alone exits 0", run("report", "-", stdin=hot).returncode == 0)
    check("--strict exits 2", run("report", "-", "--strict", stdin=hot).returncode == 2)

print("\n".join(failures) or f"{checked} checks")
sys.exit(1 if failures else 0)
