#= found no program number; allowed: those of the 1 operations of cam.yaml; say which one with --operation
%
G21 G90
G0 X1
M30
%
