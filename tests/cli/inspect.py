#!/usr/bin/env python3
"""inspect.py ROADGLINT - the inspect command from outside: its report as text and as JSON, its pictures, its refusals."""
import atexit, json, math, os, shutil, struct, subprocess, sys, tempfile

program = os.path.abspath(sys.argv[1])
failed = 0

# A sanitizer's build: what fontconfig keeps until the end is not ours.
suppressions = tempfile.NamedTemporaryFile("w", suffix=".suppressions")
suppressions.write("leak:libfontconfig\n")
suppressions.flush()
os.environ["LSAN_OPTIONS"] = "suppressions=" + suppressions.name + ":print_suppressions=0"


def run(*arguments):
    done = subprocess.run([program, *arguments], capture_output=True)
    return done.returncode, done.stdout.decode("utf-8", "surrogateescape"), done.stderr.decode("utf-8", "surrogateescape")


def check(what, holds):
    global failed
    if not holds:
        failed += 1
        print("FAILED:", what)


def report(*arguments):
    code, out, err = run("inspect", *arguments, "--json")
    check("exit 0 and a silent stderr: %s %d %s" % (arguments, code, err), code == 0 and err == "")
    def no_constant(name):
        raise ValueError(name + " is no JSON")
    return json.loads(out, parse_constant=no_constant)


def write(name, text):
    with open(name, "w") as file:
        file.write(text)


folder = tempfile.mkdtemp(prefix="roadglint-inspect-")
atexit.register(shutil.rmtree, folder)
os.chdir(folder)

# A cube of 2 m: flat facets, all closed. Its figures are counted by hand.
corners = [(x, y, z) for x in (-1, 1) for y in (-1, 1) for z in (0, 2)]
faces = ["1 2 4 3", "5 7 8 6", "1 5 6 2", "3 4 8 7", "1 3 7 5", "2 6 8 4"]
write("cube.obj", "".join("v %g %g %g\n" % c for c in corners) + "".join("f %s\n" % f for f in faces))
cube = report("cube.obj", "--freq", "77GHz")
check("cube's size", cube["size_m"] == [2, 2, 2] and cube["low_m"] == [-1, -1, 0] and cube["high_m"] == [1, 1, 2])
check("cube's counts", (cube["facets"], cube["vertices"], cube["shells"], cube["closed_shells"]) == (12, 8, 1, 1))
check("cube's faces were cut", cube["repairs"]["polygons_cut"] == 6 and cube["repairs"]["boundary_edges"] == 0)
check("cube has no limit", cube["tessellation"]["fit_up_to_hz"] is None and cube["frequency"]["fit"] is True)
check("cube's verdict", cube["verdict"] == "flat facets only: no limit from tessellation" and cube["warnings"] == [])
wavelength = 299792458 / 77e9
check("cube's far field", math.isclose(cube["frequency"]["far_field_m"], 2 * 12 / wavelength, rel_tol=1e-8))
check("cube's aspect step", math.isclose(math.radians(cube["frequency"]["aspect_step_deg"]), wavelength / (4 * math.sqrt(12)), rel_tol=1e-8))
check("digests", len(cube["file_sha256"]) == 64 and len(cube["mesh_sha256"]) == 64)

# The same numbers as millimetres are no road object, and the unit is named; turned axes change length and height.
small = report("cube.obj", "--units", "mm")
check("units", small["unit_m"] == 0.001 and small["size_m"] == [0.002] * 3 and "frequency" not in small)
check("units are doubted", small["warnings"] == ["2 mm is too small for a road object: perhaps --units m (2 m)?"])
write("car.obj", "".join("v %g %g %g\n" % (2250 * x, 900 * y, 700 * z) for x, y, z in corners) + "".join("f %s\n" % f for f in faces))
check("a car in mm, read as m", report("car.obj")["warnings"] == ["4500 m is too large for a road object: perhaps --units mm (4.5 m)?"])
check("a car in mm", report("car.obj", "--units", "mm")["warnings"] == [])
turned = report("car.obj", "--units", "mm", "--up", "x", "--front", "z")
check("axes", [round(s, 9) for s in turned["size_m"]] == [1.4, 1.8, 4.5])

# A sphere as the shape command writes it: the sagitta that was asked for is the one that is found.
check("shape", run("shape", "sphere", "--radius", "100mm", "--sagitta", "0.5mm", "--out", "sphere.ply")[0] == 0)
sphere = report("sphere.ply", "--freq", "77GHz")
found = sphere["tessellation"]["sagitta_m"][2]
check("sphere's sagitta %g" % found, 0.7 * 0.5e-3 < found < 1.3 * 0.5e-3)
check("sphere is unfit", sphere["frequency"]["fit"] is False and sphere["verdict"].startswith("not fit for 77 GHz: the facets of "))
check("sphere's limit", math.isclose(sphere["tessellation"]["fit_up_to_hz"], 299792458 / 16 / found, rel_tol=1e-8))
needed = sphere["frequency"]["edge_needed_m"]
check("shape", run("shape", "sphere", "--radius", "100mm", "--edge", "%.6fm" % needed, "--out", "fine.ply")[0] == 0)
check("edges as long as it says are fit", report("fine.ply", "--freq", "77GHz")["frequency"]["fit"] is True)
code, text, err = run("inspect", "sphere.ply", "--freq", "77GHz")
check("text says the same", code == 0 and text.splitlines()[-1] == sphere["verdict"])
check("without a frequency", run("inspect", "sphere.ply")[1].splitlines()[-1].startswith("fit up to "))

# Names that JSON must escape.
odd = b'odd "name"\\ \xff\x01.obj'
with open(odd, "wb") as file, open("cube.obj", "rb") as cube_file:
    file.write(b"g caf\xc3\xa9 \"quoted\"\n" + cube_file.read())
named = report(odd)
check("file's name", named["file"] == 'odd "name"\\ \ufffd\x01.obj')
check("part's name", [p["name"] for p in named["parts"]] == ['caf\u00e9 "quoted"'])

# Pictures.
code, text, err = run("inspect", "cube.obj", "--picture", "cube.png", "--az=-30", "--el", "10", "--width", "400")
check("picture: " + err, code == 0 and err == "")
with open("cube.png", "rb") as file:
    head = file.read(24)
check("PNG of that width", head[:8] == b"\x89PNG\r\n\x1a\n" and struct.unpack(">I", head[16:20]) == (400,))
check("nothing else is left", not [f for f in os.listdir(".") if "png" in f and f != "cube.png"])

# What is refused, with which exit code, and what the message names.
for arguments, want, names in (
    (["cube.obj", "--az", "3"], 2, "--picture"),
    (["cube.obj", "--picture", "cube.jpg"], 2, ".png"),
    (["cube.obj", "--picture", "a.png", "--width", "20"], 2, "300 to 4000"),
    (["cube.obj", "--freq", "0"], 2, "--freq"),
    (["cube.obj", "--freq", "77parsec"], 2, "--freq"),
    (["cube.obj", "--units", "yard"], 2, "--units"),
    ([], 2, "MESH"),
    (["none.obj"], 3, "none.obj"),
    (["cube.obj", "--picture", "no/such/folder.png"], 4, "no/such"),
):
    code, text, err = run("inspect", *arguments)
    check("%s: exit %d, want %d: %s" % (arguments, code, want, err), code == want and names in err and text == "" and err.count("\n") == 1)
check("nothing was drawn", not os.path.exists("cube.jpg") and not os.path.exists("a.png"))

print("%d failed" % failed if failed else "all as it should be")
sys.exit(1 if failed else 0)
