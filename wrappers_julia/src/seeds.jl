# The one rule of seeds: a given seed is used as it is; none takes one number from Julia's default
# generator, so that Random.seed! governs.

const LARGEST_SEED = Int64(2)^53

the_seed(::Nothing) = rand(0:LARGEST_SEED)
the_seed(seed::Bool) = bad_seed(seed)
the_seed(seed::Real) = isinteger(seed) && 0 <= seed <= LARGEST_SEED ? Int64(seed) : bad_seed(seed)
the_seed(seed) = bad_seed(seed)

bad_seed(seed) = refuse("seed = $(repr(seed)) cannot be used: a seed is a whole number from 0 to 2^53, " *
                        "or nothing to take one from Julia's own generator.")
