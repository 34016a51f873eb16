# What loading says when there is no library, or not the right one.

@test Folkmote.mismatch("0.1.0", 1, 1024) == ""
for other in (("0.0.9", 1, 1024), ("0.1.0", 2, 1024), ("0.1.0", 1, 512))
    sentence = Folkmote.mismatch(other...)
    @test occursin("FOLKMOTE_LIBRARY", sentence) && occursin("Folkmote.build()", sentence)
end

sentence = Folkmote.attach(joinpath(mktempdir(), "libfolkmote.so"))
@test occursin("FOLKMOTE_LIBRARY", sentence) && occursin("Folkmote.build()", sentence)
@test refused(small_study, :FOLKMOTE_BAD_ARGUMENT, "FOLKMOTE_LIBRARY")

# A file that is no library, and a library that is not ours.
stranger = joinpath(mktempdir(), "libfolkmote.so")
write(stranger, "not a library")
@test occursin("cannot be loaded", Folkmote.attach(stranger))

@test Folkmote.attach() == ""
@test length(small_study().community) == 2

# In a new session the sentence is a warning, and the session goes on.
code = "using Folkmote; println(\"alive \", isdefined(Folkmote, :build))"
child = setenv(`$(Base.julia_cmd()) --project=$(Base.active_project()) -e $code`, merge(Dict(ENV), Dict("FOLKMOTE_LIBRARY" => "/nowhere/lib.so")))
said = read(pipeline(child; stderr = "$stranger.err"), String)
@test said == "alive true\n"
@test occursin("FOLKMOTE_LIBRARY", read("$stranger.err", String))
