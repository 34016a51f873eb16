# Ctrl-C in the middle of a long call: the session has it within two seconds, and goes on.

script = joinpath(ROOT, "tests", "julia", "interrupt_child.jl")
child = open(`$(Base.julia_cmd()) --project=$(Base.active_project()) $script`, "r")
@test readline(child) == "started"
sleep(1.5) # well inside the call
@test process_running(child)
sent = time()
kill(child, Base.SIGINT)
@test readline(child) == "interrupted"
waited = time() - sent
@test waited < 2
@info "an interrupt arrives after" seconds = round(waited; digits = 2)
@test readline(child) == "alive 1"
@test readline(child) == "leaked 0"
wait(child)
@test child.exitcode == 0
