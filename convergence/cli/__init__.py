"""The command line: a command is a file, its one public function the command, found by its name.

Commands read, call one of the four steps and print; they decide nothing about numbers. What they
need is imported when they run, so that the first answer comes fast. Exit codes: 0 all sound, 1 not
all sound, 2 the study or the command cannot be used, 3 a level could not be solved or a defect of the
program, 130 stopped by the user.
"""
