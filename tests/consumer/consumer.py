"""Installs the build, configures a foreign project against it with find_package, builds and runs it.
Usage: consumer.py CMAKE BUILD PROJECT CXX sanitize:KINDS"""
import subprocess
import sys
import tempfile

cmake, build, project, cxx, sanitize = sys.argv[1:6]
sanitize = sanitize.removeprefix("sanitize:")
flags = [f"-DCMAKE_CXX_FLAGS=-fsanitize={sanitize}"] if sanitize else []
with tempfile.TemporaryDirectory() as scratch:
    def run(*command):
        subprocess.run(command, check=True, stdout=subprocess.DEVNULL)
    run(cmake, "--install", build, "--prefix", f"{scratch}/prefix")
    run(cmake, "-G", "Ninja", "-S", project, "-B", f"{scratch}/build", f"-DCMAKE_PREFIX_PATH={scratch}/prefix",
        f"-DCMAKE_CXX_COMPILER={cxx}", "-DCMAKE_BUILD_TYPE=Debug", *flags)
    run(cmake, "--build", f"{scratch}/build")
    out = subprocess.run([f"{scratch}/build/consumer"], check=True, capture_output=True, text=True).stdout
print("3.70 vol at 4 degC needs", out.strip(), "bar gauge")
sys.exit(0 if abs(float(out) - 1.579) < 0.005 else 1)
