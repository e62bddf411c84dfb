# Decompositions and dimensions of SU(3) by GAP's Lie algebra of type A2, which knows nothing of Couplet.
L := SimpleLieAlgebra("A", 2, Rationals);;
passed := 0;; failed := 0;;
say := function(holds, name)
  if holds then passed := passed + 1; Print("ok  ", name, "\n");
  else failed := failed + 1; Print("FAILED  ", name, "\n"); fi;
end;;
wrong := Filtered(dimensions, d -> DimensionOfHighestWeightModule(L, d[1]) <> d[2]);;
say(wrong = [], Concatenation("dimensions of ", String(Length(dimensions)), " irreps with p + q <= 8"));
if wrong <> [] then Print("        ", wrong, "\n"); fi;
sorted := list -> SortedList(list);;
wrong := Filtered(products, function(p)
  local r;
  r := DecomposeTensorProduct(L, p[1], p[2]);
  return sorted(List([1..Length(r[1])], i -> [r[1][i], r[2][i]])) <> sorted(p[3]);
end);;
say(wrong = [], Concatenation("decompositions of ", String(Length(products)), " products with p + q <= 3"));
if wrong <> [] then Print("        ", wrong[1], "\n"); fi;
# The check itself must notice a wrong multiplicity.
say(sorted([[[1,1],2]]) <> sorted([[[1,1],1]]), "a wrong multiplicity would be noticed");
Print(passed, " passed, ", failed, " failed\n");
QUIT_GAP(Minimum(failed, 1));
