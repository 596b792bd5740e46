"""Part numbers for comparing."""


def comparing_key(number: str) -> str:
    t = "".join(c for c in number.upper() if c.isalnum())
    return t.lstrip("0") or t[:1]
