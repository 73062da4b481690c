\\ Rank over the rationals by PARI's matrank; prints rank and seconds of the elimination alone. `data` is set by the caller.
{
  my(m = matrix(data[1][1], data[1][2]), r);
  for (i = 2, #data, m[data[i][1], data[i][2]] = data[i][3]);
  gettime();
  r = matrank(m);
  printf("{\"rank\": %d, \"seconds\": %.3f}\n", r, gettime() / 1000.);
}
