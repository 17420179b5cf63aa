"""What really happened at the bench, and what that changes.

entry     one thing that happened to one culture
journal   the file of entries beside the plan
progress  where every culture stands, and which days move
"""
