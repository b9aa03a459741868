"""DOIs marked `rule` in sources.csv, worked out anew from the citation.

The rules, from memory:
  Royal Society of Chemistry, journals up to 1996: code of the journal, last three digits of the year, two digits of the
    volume (00 where volumes are years), five of the page: J. Chem. Soc. 1960, 1064 -> 10.1039/JR9600001064.
  Copernicus: acronym, volume, page, year: Atmos. Chem. Phys. 2006, 6, 3625 -> 10.5194/acp-6-3625-2006.
The first article of a citation is meant.
"""
import csv
import pathlib
import re
import sys

YEAR_VOLUME_PAGE = r" (\d{4}), (\d+), (\d+)"
YEAR_PAGE = r" (\d{4}), (\d+)"
WITH_VOLUME = {
    r"Trans\. Faraday Soc\.": "TF",
    r"J\. Chem\. Soc\., Faraday Trans\. 1": "F1",
    r"J\. Chem\. Soc\., Faraday Trans\. 2": "F2",
    r"J\. Chem\. Soc\., Faraday Trans\.": "FT",
    r"Quart\. Rev\.": "QR",
}
BY_YEAR = {
    r"J\. Chem\. Soc\. B": "J2",
    r"J\. Chem\. Soc\., Perkin Trans\. 2": "P2",
    r"J\. Chem\. Soc\.": "JR",
}
COPERNICUS = {r"Atmos\. Chem\. Phys\.": "acp", r"Earth Syst\. Sci\. Data": "essd", r"Geosci\. Model Dev\.": "gmd"}
LAST_BY_PAGE = 1996  # later DOIs carry the number of the manuscript


def doi_of(citation):
    """The DOI a citation has by rule, or None."""
    found = []
    for journals, code in ((WITH_VOLUME, "volume"), (BY_YEAR, "year"), (COPERNICUS, "copernicus")):
        for name, key in journals.items():
            m = re.search(name + (YEAR_PAGE if code == "year" else YEAR_VOLUME_PAGE) + r"\b", citation)
            if not m:
                continue
            numbers = [int(n) for n in m.groups()]
            year = numbers[0]
            if code == "copernicus":
                found.append((m.start(), f"10.5194/{key}-{numbers[1]}-{numbers[2]}-{year}"))
            elif year <= LAST_BY_PAGE:
                volume, page = (numbers[1], numbers[2]) if code == "volume" else (0, numbers[1])
                found.append((m.start(), f"10.1039/{key}{year % 1000:03}{volume:02}{page:05}"))
    return min(found)[1] if found else None


def faults(rows):
    for row in rows:
        if row["doi_basis"] != "rule":
            continue
        wanted = doi_of(row["citation"])
        if wanted != row["doi"]:
            yield f"{row['id']}: {row['doi']}, by rule {wanted}"


def self_test():
    """Citations with the DOI their rule gives, from memory, or none; and a wrong one must be noticed."""
    known = {
        "J. Chem. Soc. 1960, 123": "10.1039/JR9600000123",
        "Trans. Faraday Soc. 1960, 56, 1": "10.1039/TF9605600001",
        "J. Chem. Soc., Faraday Trans. 1 1982, 78, 2971": "10.1039/F19827802971",
        "J. Chem. Soc., Perkin Trans. 2 1984, 1013": "10.1039/P29840001013",
        "Atmos. Chem. Phys. 2006, 6, 3625": "10.5194/acp-6-3625-2006",
        "J. Chem. Soc., Faraday Trans. 1998, 94, 1437": None,
        "J. Am. Chem. Soc. 1955, 77, 4031": None,
    }
    wrong = [f"{text}: {doi_of(text)}" for text, doi in known.items() if doi_of(text) != doi]
    seeded = [{"id": "x", "citation": "J. Chem. Soc. 1960, 123", "doi": "10.1039/JR9600000124", "doi_basis": "rule"}]
    if not list(faults(seeded)):
        wrong.append("a wrong DOI passes")
    return wrong


def main():
    path = pathlib.Path(sys.argv[1]) / "sources.csv"
    with path.open(newline="", encoding="utf-8") as file:
        rows = list(csv.DictReader(file))
    wrong = self_test() + list(faults(rows))
    count = sum(row["doi_basis"] == "rule" for row in rows)
    if count < 10:
        wrong.append(f"only {count} DOIs by rule: the test would say little")
    for line in wrong:
        print("FAIL", line)
    print(f"{count} DOIs by rule")
    return 1 if wrong else 0


if __name__ == "__main__":
    sys.exit(main())
