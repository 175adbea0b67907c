"""How firm a ranking is: exact break-even values, the break-even map, and the questions of planner and auditor."""
