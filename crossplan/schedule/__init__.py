"""Which day, whose hands.

week      working days, counted from the start
culture   what one culture does when it is set up on a given day
assay     a target on the rig, and when its flies can be tested
day_model cultures and assays as a constraint model
solve     the best set-up days for all cultures at once
tasks     the days written down as tasks, and shared among people
check     an independent check of a schedule that shares no code with the solver
from_plan the plan's steps as cultures, and the days back into the plan
"""
