"""What is said wherever a reading may protect something."""

CAUTION = (
    "Where this reading protects people, a battery or property: a thermistor limit must not be the only protection unless "
    "the whole circuit is assessed for it, an open or shorted sensor must lead to the safe state, and local codes and "
    "licensed practice decide."
)
