# Every class prints short, honestly, and as a picture where it has one.

st = small_study(mutual = true)
eq = equilibrium(st, some_beliefs())
games = study((community = repeat(1:4; inner = 12), member = repeat(1:12; outer = 4)))
multiple = equilibrium(games, several_beliefs())
starved = equilibrium(games, starving_beliefs(); sweeps = 2)
cf = counterfactual(eq, scenario(st, broadcast(precision = 2)); draws = 20, seed = 7)
curve = turnout(multiple; given = range(-1, 2; length = 11))

text(x) = shown("text/plain", x)
@test occursin("2 communities, 5 members", text(st)) && occursin("fewer than 10", text(st))
@test startswith(text(eq), "Equilibrium of 2 communities: 2 proved unique")
@test occursin("north *", text(eq)) && occursin("not for sharing", text(eq))
@test startswith(text(multiple), "Equilibrium of 4 communities: 4 several") && occursin(" to ", text(multiple))
@test !occursin("fewer than 10", text(multiple))
@test occursin("obstacle", text(curve)) && occursin("seed 7", text(cf)) && occursin("all, pooled", text(cf))
@test occursin("keep them private", text(simulate(eq; seed = 1, level = :member)))
@test occursin("prior_mean = 0.4", text(some_beliefs())) && occursin("benefit = 1", text(share_payoff()))
@test occursin("1. broadcast to everyone", text(scenario(st, broadcast(precision = 2))))
@test occursin("2 communities", string(eq)) && !occursin('\n', string(eq))

# What has not converged never prints as an answer, in text or picture.
bad_answers = [turnout(starved), turnout(starved; given = [0, 1], at_least = 0.5), simulate(starved; seed = 1), starved,
               counterfactual(starved, scenario(games, shift_cost(0.1)); draws = 2, seed = 1)]
for x in bad_answers, mime in ("text/plain", "text/html")
    @test occursin("no answer", shown(mime, x)) && occursin("not converged", shown(mime, x))
end
@test !occursin(string(Folkmote.share_text(starved.turnout_greatest[1])), text(starved))

# A long table is cut and says so.
many = equilibrium(random_study(40, 5; contacts = 3), some_beliefs())
@test length(split(text(many), '\n')) < 30 && occursin("20 more rows", text(many))
@test occursin("more rows", sprint((io, x) -> show(IOContext(io, :limit => true, :displaysize => (20, 80)), MIME("text/plain"), x), many))

# Pictures and pages.
for x in (eq, multiple, starved, many, curve, cf)
    picture = shown("image/svg+xml", x)
    @test startswith(picture, "<svg") && endswith(picture, "</svg>\n") && !occursin("NaN", picture)
    @test occursin("<svg", shown("text/html", x)) && occursin("<table>", shown("text/html", x))
end
for x in (eq, multiple, starved)
    picture = shown("image/svg+xml", cutoff_picture(x))
    @test startswith(picture, "<svg") && endswith(picture, "</svg>\n") && !occursin("NaN", picture)
end
@test !showable(MIME("image/svg+xml"), turnout(eq)) && occursin("<table>", shown("text/html", turnout(eq)))
@test refused(() -> shown("image/svg+xml", turnout(eq)), :FOLKMOTE_BAD_ARGUMENT, "given")
@test occursin("&lt;b&gt;", shown("image/svg+xml", equilibrium(study((community = ["<b>", "<b>"], member = [1, 2])), some_beliefs())))

# What a data editor asks for.
block = string(provenance(cf))
for word in ("folkmote", "0.1.0", "stream version 1", "Julia", string(VERSION), "machine", "time (UTC)", "run time", "seed", "7", "digest")
    @test occursin(word, block)
end
@test occursin("none used", string(provenance(eq))) && string(provenance(st)) == text(provenance(st))

# Every exported name is documented, with an example.
function documentation(binding)
    found = get(Base.Docs.meta(Folkmote), binding, nothing)
    return found === nothing ? "" : join(join(part.text) for part in values(found.docs))
end
of(name, home = Folkmote) = documentation(Base.Docs.Binding(home, name))
@test filter(name -> !occursin("# Example", of(name)), filter(!=(:Folkmote), names(Folkmote))) == []
@test occursin("# Example", of(:broadcast, Base)) && occursin("jobs", of(:build))
for caution in ("ethics approval and consent", "private", "never a\n  list of whom to press", "crowd-safety", "Local law", "acts on one number")
    @test occursin(caution, of(:Folkmote))
end
