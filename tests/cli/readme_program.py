"""Takes the C++ program out of the README: readme_program.py README TARGET."""

import pathlib
import re
import sys

blocks = re.findall(r"^```cpp\n(.*?)^```", pathlib.Path(sys.argv[1]).read_text(), re.M | re.S)
if len(blocks) != 1:
    sys.exit(f"one program was expected in {sys.argv[1]}, there are {len(blocks)}")
pathlib.Path(sys.argv[2]).write_text(blocks[0])
