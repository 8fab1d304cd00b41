"""What the commands do, one module a command: read, run, write every file or none, print, and return the exit status.

    0 solved and within the allowables     1 an internal fault     2 the input is wrong
    3 something is past its allowable      4 some case is unstable, none or neutral (a free spin of a ball-based spar is only noted)

3 and 4 still write every file; 4 goes before 3, and 1 before both.
"""
