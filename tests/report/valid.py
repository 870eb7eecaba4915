"""Reads reports by the rules of HTML (a parser of its own, strict) and tells what it can't take: valid.py FILE..."""

import sys

import html5lib


def complaints(text):
    parser = html5lib.HTMLParser(tree=html5lib.getTreeBuilder("etree"), namespaceHTMLElements=False)
    tree = parser.parse(text)
    found = [f"line {line}: {what} {about}" for (line, _), what, about in parser.errors]
    ids = [element.get("id") for element in tree.iter() if element.get("id")]
    found += [f"two elements are called {name}" for name in set(ids) if ids.count(name) > 1]
    links = [element.get("href") for element in tree.iter() if element.get("href")]
    found += [f"a link leads out: {link}" for link in links if not link.startswith("#") or link[1:] not in ids]
    for table in tree.iter("table"):
        if table.find("caption") is None:
            found.append("a table has no caption")
        found += ["a heading of a table says not of what" for head in table.iter("th") if head.get("scope") not in ("row", "col")]
        columns = len(table.findall("thead/tr/th"))
        found += ["a row has another number of cells than the head" for row in table.iterfind("tbody/tr") if len(row) != columns]
    return found


def main(paths):
    # What it is to find, it finds.
    for bad in ["<p>", "<!DOCTYPE html><title>x</title><p id=a><p id=a>", "<!DOCTYPE html><title>x</title><table><tr><th>x</table>"]:
        assert complaints(bad), bad
    assert paths, "name the reports to read"
    bad = 0
    for path in paths:
        with open(path, encoding="utf-8") as file:
            found = complaints(file.read())
        for what in found:
            print(f"{path}: {what}")
        bad += bool(found)
    print(f"{len(paths) - bad} passed, {bad} failed")
    return bad


if __name__ == "__main__":
    sys.exit(1 if main(sys.argv[1:]) else 0)
