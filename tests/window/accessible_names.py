"""accessible_names.py: what has no name for a screen reader."""
import re

from harness import Failed

BAD_NAME = re.compile(r"^(Gtk|Adw|Tf)\w*$|^$|(^|\w| )_\w")  # of a class, none, with the mark of its letter
DRAWINGS = {"image", "canvas", "drawing area", "icon"}


def unnamed(window):
    """Nodes that can be focused or used, or that draw, whose name is empty or the name of a class."""
    found = []
    for _, node in window.walk(shown=True):
        usable = window.has_state(node, "FOCUSABLE") or node.getRoleName() in DRAWINGS
        if usable and BAD_NAME.search(node.name or ""):
            found.append(f"{node.getRoleName()} “{node.name}” in “{node.parent.name if node.parent else ''}”")
    return found


def expect_named(window, when):
    found = unnamed(window)
    if found:
        raise Failed(f"without a name {when}: {len(found)}: " + "; ".join(sorted(set(found))[:12]))
