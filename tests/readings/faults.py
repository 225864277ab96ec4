"""What goes wrong with files, pipes and machines. Usage: faults.py CAPSIGH TOP [KILLS]

Disk full, closed pipe, gz cut off, gz in several members, a file that grows, a line of 10 MB, a slow
pipe, --stop-on-error, and a run killed KILLS times at random that --resume brings to its end with no
row lost or doubled."""
import gzip
import os
import pathlib
import random
import signal
import subprocess
import sys
import tempfile
import time

capsigh, top = sys.argv[1], pathlib.Path(sys.argv[2])
kills = int(sys.argv[3]) if len(sys.argv) > 3 else 5
recipe = str(top / "scenarios/readings/shift.toml")
failures = []
HEADER = "id,Temp,P,valve\n"


def check(what, holds, shown=""):
    if not holds:
        failures.append(f"{what}: {shown}")


def rows(n, seed=1):
    made = random.Random(seed)
    return "".join(f"{i},{made.uniform(19, 22):.1f},{made.uniform(3.7, 4.1):.2f},{i % 4 + 1}\n" for i in range(n))


def run(*arguments, **options):
    return subprocess.run([capsigh, "readings", *arguments, "--for", recipe], capture_output=True, timeout=300,
                          **options)


with tempfile.TemporaryDirectory() as scratch:
    scratch = pathlib.Path(scratch)
    text = HEADER + rows(3000)
    plain = scratch / "in.csv"
    plain.write_text(text)
    whole = run(str(plain))
    check("a plain file", whole.returncode in (0, 1) and whole.stdout.count(b"\n") == 3001, whole.stderr[:500])

    # The same bytes from standard input, from gz, and from gz in two members.
    by_pipe = run("-", input=text.encode())
    check("standard input", by_pipe.stdout == whole.stdout, by_pipe.stderr[:500])
    packed = scratch / "in.csv.gz"
    packed.write_bytes(gzip.compress(text.encode()))
    check("gz", run(str(packed)).stdout == whole.stdout)
    packed.write_bytes(gzip.compress(text[:1000].encode()) + gzip.compress(text[1000:].encode()))
    check("gz in two members", run(str(packed)).stdout == whole.stdout)
    check("gz from standard input", run("-", input=packed.read_bytes()).stdout == whole.stdout)

    # Cut off: what could be read is judged, and the run fails.
    packed.write_bytes(gzip.compress(text.encode())[:-2000])
    cut = run(str(packed), "--summary", str(scratch / "cut.json"))
    check("truncated gz", cut.returncode == 3 and b"cut off" in cut.stderr, cut)
    check("truncated gz: rows so far", whole.stdout.startswith(cut.stdout) and cut.stdout.count(b"\n") > 100)
    check("truncated gz: no summary of a part", not (scratch / "cut.json").exists())

    full = run(str(plain), "--out", "/dev/full")
    check("disk full", full.returncode == 3 and b"No space left" in full.stderr, full)
    with open("/dev/full", "wb") as sink:
        done = subprocess.run([capsigh, "readings", str(plain), "--for", recipe], stdout=sink,
                              stderr=subprocess.PIPE, timeout=60)
    check("disk full on standard output", done.returncode == 3 and b"No space left" in done.stderr, done)
    missing = run(str(scratch / "no such file.csv"))
    check("missing file", missing.returncode == 3 and b"cannot be opened" in missing.stderr, missing)
    folder = run(str(scratch))
    check("a directory", folder.returncode == 3, folder)

    # Closed pipe: ends at once, with the failure said.
    endless = subprocess.Popen([capsigh, "readings", "-", "--for", recipe], stdin=subprocess.PIPE,
                               stdout=subprocess.PIPE, stderr=subprocess.PIPE)
    endless.stdin.write(HEADER.encode())
    endless.stdin.flush()
    endless.stdout.readline()
    endless.stdout.close()
    try:
        for _ in range(1000):
            endless.stdin.write(rows(100).encode())
    except BrokenPipeError:
        pass
    said = endless.stderr.read()
    try:
        endless.stdin.close()
    except BrokenPipeError:
        pass
    check("closed pipe", endless.wait(timeout=60) == 3 and b"Broken pipe" in said, (endless.returncode, said))

    # A slow pipe gets each row at once.
    slow = subprocess.Popen([capsigh, "readings", "-", "--for", recipe], stdin=subprocess.PIPE,
                            stdout=subprocess.PIPE, stderr=subprocess.PIPE)
    slow.stdin.write(HEADER.encode())
    slow.stdin.flush()
    check("slow pipe: header", slow.stdout.readline().startswith(b"id,Temp,P,valve,content"))
    for row in rows(3).splitlines():
        slow.stdin.write(row.encode() + b"\n")
        slow.stdin.flush()
        check("slow pipe: row", slow.stdout.readline().startswith(row.encode()))
    slow.stdin.close()
    slow.stdout.read()
    check("slow pipe: end", slow.wait(timeout=60) in (0, 1))
    slow.stderr.close()

    # A line of 10 MB is rejected, in constant memory; what follows is judged.
    long = scratch / "long.csv"
    long.write_text(HEADER + rows(10) + "x" * 10_000_000 + "\n" + rows(10, 2))
    lengthy = run(str(long), "--rejects", str(scratch / "long-rejects.csv"))
    check("a line of 10 MB", lengthy.returncode == 1 and lengthy.stdout.count(b"\n") == 21, lengthy.stderr[-500:])
    said = (scratch / "long-rejects.csv").read_text()
    check("a line of 10 MB: reason", said.splitlines()[1].startswith("12,the line is longer than"), said[:200])

    # --stop-on-error: nothing behind the bad row, exit 2.
    bad = scratch / "bad.csv"
    bad.write_text(HEADER + rows(10) + "11,cold,3.9,1\n" + rows(10, 2))
    stopped = run(str(bad), "--stop-on-error")
    check("--stop-on-error", stopped.returncode == 2 and stopped.stdout.count(b"\n") == 11, stopped)
    check("--stop-on-error: line and reason", b"bad.csv:12: " in stopped.stderr and b"'cold'" in stopped.stderr,
          stopped.stderr)
    went_on = run(str(bad))
    check("a bad row", went_on.returncode == 1 and went_on.stdout.count(b"\n") == 21, went_on)

    # A file that grows: the rows so far, and with --resume the rest.
    growing = scratch / "growing.csv"
    judged = scratch / "growing-judged.csv"
    lines = text.splitlines(True)
    growing.write_text("".join(lines[:1000]))
    run(str(growing), "--out", str(judged))
    check("growing file: first part", whole.stdout.startswith(judged.read_bytes()))
    growing.write_text(text)
    grown = run(str(growing), "--out", str(judged), "--resume")
    check("growing file: the rest", judged.read_bytes() == whole.stdout and grown.stderr == whole.stderr)
    again = run(str(growing), "--out", str(judged), "--resume")
    check("resumed when all is there", judged.read_bytes() == whole.stdout and again.returncode == whole.returncode)
    growing.write_text(HEADER + rows(3000, seed=9))
    other = run(str(growing), "--out", str(judged), "--resume")
    check("resumed from another input", other.returncode == 2 and b"was not written from" in other.stderr, other)
    check("resumed from another input: file left alone", judged.read_bytes() == whole.stdout)

    # Killed at random, resumed until it comes to its end.
    source = scratch / "many.csv"
    source.write_text(HEADER + rows(200_000, 3) + "bad\n" + rows(200, 4))
    reference, reject_reference = scratch / "reference.csv", scratch / "reference-rejects.csv"
    began = time.monotonic()
    run(str(source), "--out", str(reference), "--rejects", str(reject_reference))
    took = time.monotonic() - began
    dice = random.Random(17)
    out, rejects = scratch / "killed.csv", scratch / "killed-rejects.csv"
    ended = 0
    for i in range(kills):
        if ended or i % 10 == 0:
            out.unlink(missing_ok=True)
            rejects.unlink(missing_ok=True)
            ended = 0
        threads = str(dice.choice((1, 2, 3)))
        child = subprocess.Popen([capsigh, "readings", str(source), "--for", recipe, "--out", str(out), "--rejects",
                                  str(rejects), "--resume", "--threads", threads], stdout=subprocess.DEVNULL,
                                 stderr=subprocess.DEVNULL)
        try:
            child.wait(timeout=dice.uniform(0, 1.2 * took))
            ended = 1
        except subprocess.TimeoutExpired:
            child.send_signal(signal.SIGKILL)
            child.wait()
        if out.exists():
            check(f"killed {i}: what is there is a beginning", reference.read_bytes().startswith(out.read_bytes()))
    last = run(str(source), "--out", str(out), "--rejects", str(rejects), "--resume")
    check("killed and resumed: no row lost or doubled",
          out.read_bytes() == reference.read_bytes() and last.returncode == 1, last.stderr[-300:])
    check("killed and resumed: rejects", rejects.read_bytes() == reject_reference.read_bytes())

print("\n".join(failures) or f"files, pipes and {kills} kills")
sys.exit(1 if failures else 0)
