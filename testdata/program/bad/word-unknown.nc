#= @: found "U"; words G X Y Z A B C I J R F S T D H N O M P are read here
%
O1
N10 G21 G17 G90 G40 G49 G80 G94 G54
G0 X1 ▸U3
M30
%
