"""What a plan is, as data, and the check of a plan that cannot see how it was made.

screen   what was asked for: targets, lab, calendar and means, as read from the screen file
model    the plan: targets, steps, tasks, totals (the JSON contract)
replay   every step done again by genetics alone
"""
