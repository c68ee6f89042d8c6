#= @: found no blocks; a program has at least one
%
(nothing)
%
▸