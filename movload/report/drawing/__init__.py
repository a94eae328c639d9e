"""How does a truss and what crosses it look in ink? The parts of the drawings that ``report.figures`` puts together."""
