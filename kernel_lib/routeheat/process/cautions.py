"""The cautions that results print: a short form beside numbers, the full form with reports."""

from __future__ import annotations

SHORT = "A screening aid on the values typed; it does not replace tests, a hazard study or a competent person."
FULL: tuple[str, ...] = (
    "Screening aid; does not replace tests, a hazard study or a competent person.",
    "Values typed are not verified.",
    "A class is only as good as its TD24.",
    "Gas, toxicity, flammability, corrosion, dust and impact sensitivity are not covered unless entered.",
    "Mixtures, impurities, metals and thermal history can lower stability.",
    "No relief sizing.",
    "Estimated values never give a class without the word provisional.",
)
FROM_MEMORY = "from memory, check against the source"
THRESHOLDS = "thresholds from memory, confirm against your own standard"
NOTHING_EXCEEDED = "no criterion exceeded on the data entered"
STOP = "STOP: TD24 is at or below the process temperature"
AMBIENT = "TD24 at or below ambient"
SCREENING = (
    "None of these checks proves that a substance is stable; a finding that says nothing asks for no test less. "
    "Mixtures, impurities and metals can lower stability."
)
WASTE = "Mass figures say nothing of toxicity or energy; figures with different boundaries are not compared."
