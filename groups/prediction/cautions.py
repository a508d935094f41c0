"""The cautions that go with every prediction."""

CAUTIONS: tuple[str, ...] = (
    "These numbers are predictions, not data.",
    "Do not use them for relief sizing, safety-critical or final design without measurements.",
    "Flammability, toxicity, reactivity and stability are not assessed unless an answer says so.",
    "Follow local codes, safety data sheets and licensed engineering practice.",
)
