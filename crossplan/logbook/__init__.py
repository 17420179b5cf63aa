"""What really happened at the bench, and what that changes.

entry     one thing that happened to one culture
journal   the file of entries beside the plan
culture   what the entries say of one culture
progress  where every culture stands, and which days move
day       the work of one day, what is overdue, and the above
"""
