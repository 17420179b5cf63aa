"""From the shelf to the target: which crosses, and why.

wish         what the final flies must be: components, copies, sex, what they must not carry
target       from the words of a screen to a wish, and wishes that no fly can meet
forms        the shelf reduced to what one wish can use
segregation  one chromosome of one cross: what comes out, and what can be told apart
search       fewest generations, exhaustively
realise      a scheme that was found, carried out on the real stocks: classes, shares, rules in words
batch        many targets: one search for each shape, crosses shared
controls     matched controls
effects      what effectors ask of the bench
screen_plan  a screen on a shelf
explain      why a target cannot be made, and what would make it possible
numbers      how many flies and vials each cross needs
record       all of it written into the plan
"""
