"""Writes numpy-files.json: small .npy and .npz files as NumPy itself writes them, with their values, as base64.

Run: python3 numpy-files.py > numpy-files.json   (needs NumPy; the tests do not)
"""
import base64
import io
import json
import numpy as np

files = []


def add(word, data, values):
    files.append({"word": word, "base64": base64.b64encode(data).decode(), "values": values})


def npy(array, version=None):
    buffer = io.BytesIO()
    np.lib.format.write_array(buffer, array, version=version)
    return buffer.getvalue()


COUNTS = [[0, 1, 2, 3, 100], [7, 6, 5, 4, 127]]
TYPES = [o + t for t in ["i2", "i4", "i8", "u2", "u4", "u8", "f2", "f4", "f8"] for o in "<>"] + ["|i1", "|u1"]
for dtype in TYPES:
    for order in "CF":
        array = np.array(COUNTS, dtype=dtype, order=order)
        add(f"{dtype} 2-D {order}", npy(array), array.tolist())
    array = np.array(COUNTS[0], dtype=dtype)
    add(f"{dtype} 1-D", npy(array), array.tolist())
add("|b1 1-D", npy(np.array([True, False, True, True])), [1, 0, 1, 1])
add("|b1 2-D F", npy(np.array([[True, False], [True, True], [False, False]], order="F")), [[1, 0], [1, 1], [0, 0]])
add("<u2 largest", npy(np.array([65535, 0, 32768], dtype="<u2")), [65535, 0, 32768])
add("<u4 largest", npy(np.array([2**32 - 1, 65536, 1], dtype="<u4")), [2**32 - 1, 65536, 1])
add(">u4 largest", npy(np.array([2**32 - 1, 65536, 1], dtype=">u4")), [2**32 - 1, 65536, 1])
add("<i8 large", npy(np.array([2**31, 2**32 - 1, 5], dtype="<i8")), [2**31, 2**32 - 1, 5])
add(">u8 large", npy(np.array([2**31, 2**32 - 1, 5], dtype=">u8")), [2**31, 2**32 - 1, 5])
add("<f2 halves", npy(np.array([2048, 65504, 1024, 3], dtype="<f2")), [2048, 65504, 1024, 3])
for version in [(1, 0), (2, 0), (3, 0)]:
    add(f"version {version[0]}", npy(np.array([3, 1, 4, 1, 5], dtype="<i4"), version), [3, 1, 4, 1, 5])
for dtype in ["<i8", ">i8", "<u8", ">u8"]:
    ticks = [5, 2**31, 2**40 + 1, 2**53 - 1]
    add(f"ticks {dtype}", npy(np.array(ticks, dtype=dtype)), ticks)
for dtype in ["<f8", ">f8"]:
    add(f"seconds {dtype}", npy(np.array([0.0000001, 0.25, 0.25, 1.5], dtype=dtype)), [0.0000001, 0.25, 0.25, 1.5])
for name, save in [("stored", np.savez), ("deflated", np.savez_compressed)]:
    buffer = io.BytesIO()
    save(buffer, dots=np.array(COUNTS, dtype="<u2"), times=np.array([1, 5, 9, 12], dtype="<i8"))
    add(f"npz {name}", buffer.getvalue(), {"dots.npy": COUNTS, "times.npy": [1, 5, 9, 12]})
structured = npy(np.array([(1, 2.0)], dtype=[("a", "<i4"), ("b", "<f4")]))
add("structured", structured, None)
add("complex", npy(np.array([1 + 2j])), None)
add("0-D", npy(np.array(5)), None)
add("3-D", npy(np.zeros((2, 2, 2))), None)
add("empty", npy(np.zeros((0, 3))), None)
add("text", npy(np.array(["a", "bc"])), None)
print(json.dumps({"source": "NumPy Enhancement Proposal 1: the .npy format; files written by NumPy.",
                  "how": f"numpy-files.py, NumPy {np.__version__}", "files": files}))
