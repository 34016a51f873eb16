# What is made is given back; what is closed says so.

live() = (GC.gc(); GC.gc(); Raw.folkmote_live_handles())

@noinline function make_and_drop()
    st = small_study()
    eq = equilibrium(st, some_beliefs())
    sc = scenario(st, broadcast(precision = 2))
    counterfactual(eq, sc; draws = 2, seed = 1)
    turnout(eq; at_least = 0.5)
    simulate(eq; seed = 1)
    refusal(() -> study((community = [1, 1], member = [1, 1])))
    refusal(() -> scenario(st, thin_links(2; seed = 1)))
    refusal(() -> equilibrium(st, some_beliefs(prior_mean = [1, 2, 3])))
    return nothing
end

before = live()
make_and_drop()
make_and_drop()
@test live() == before

st = small_study()
@test Raw.folkmote_live_handles() == before + 1
eq = equilibrium(st, some_beliefs())
@test Raw.folkmote_live_handles() == before + 2
close(st)
close(st)
close(eq)
@test Raw.folkmote_live_handles() == before
@test refused(() -> equilibrium(st, some_beliefs()), :FOLKMOTE_BAD_ARGUMENT, "study is closed")
@test refused(() -> turnout(eq), :FOLKMOTE_BAD_ARGUMENT, "equilibrium is closed")
@test eq.verdict[1] === Symbol("proved unique") # what was read stays

# Inputs may go before what was made of them.
held = equilibrium(small_study(), some_beliefs())
GC.gc()
@test length(simulate(held; nsim = 3, seed = 1).community) == 6

# A result that was saved and read back keeps its numbers, and says that its kernel object is gone.
using Serialization: serialize, deserialize
saved = let room = IOBuffer()
    serialize(room, held)
    deserialize(seekstart(room))
end
@test saved.turnout_least == held.turnout_least && provenance(saved).result == provenance(held).result
@test refused(() -> turnout(saved), :FOLKMOTE_BAD_ARGUMENT, "read back")
