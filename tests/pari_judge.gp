\\ An independent judge of certificates: every stored statement, decided by PARI.
\\ Each function returns "" for a true statement and else the name of what is false.
\\ Solutions are lists of [base, exponent].

isalgebraic(a, b) = {
  if (a == 0, return(1));
  if (!issquarefree(b) || poldegree(a) >= poldegree(b), return(0));
  my(R = polresultant(b, a - z*deriv(b, x), x));
  my(F = factor(R)[, 1]);
  for (i = 1, #F, if (poldegree(F[i], z) > 1, return(0)));
  1
};
logder(S) = sum(i = 1, #S, S[i][2]*deriv(S[i][1], x)/S[i][1]);
constant(f) = f != 0 && deriv(f, x) == 0;
lead(f) = polcoef(f, poldegree(f));
squarefreemod(V, p) = isprime(p) && lead(V) % p != 0 && (poldegree(V) <= 1 || poldisc(V) % p != 0);
coprimemod(f, g, p) = poldegree(gcd(f*Mod(1, p), g*Mod(1, p))) == 0;

integral(S, x0, L) = {
  my(y = 1 + O(t^60), v);
  for (i = 1, #S,
    v = subst(S[i][1], x, x0 + L*t);
    if (polcoef(v, 0) == 0, return(0));
    y *= exp(S[i][2]*log(v/polcoef(v, 0) + O(t^60))));
  denominator(content(truncate(y))) == 1
};
eisenstein(S, e) = #e == 0 || (e[2] >= 1 && integral(S, e[1], e[2]));

partials(a, b, pf) = {
  if (!constant(b/prod(i = 1, #pf, pf[i][1])), return(0));
  for (i = 1, #pf, if ((a - pf[i][2]*deriv(b, x)) % pf[i][1] != 0, return(0)));
  1
};

algebraicside(a, b, S, pf, N, mp, q, e) = {
  my(V = prod(i = 1, #S, S[i][1]));
  if (logder(S) != a/b, return("solution"));
  if (!issquarefree(V), return("squarefree"));
  if (N != lcm(apply(s -> denominator(s[2]), S)), return("degree"));
  if (!partials(a, b, pf), return("partial fractions"));
  if (mp[1] != N, return("degree of the minimal polynomial"));
  if (logder(mp[2]) - logder(mp[3]) != N*logder(S), return("minimal polynomial"));
  if (!squarefreemod(V, q), return("squarefree prime"));
  if (!eisenstein(S, e), return("eisenstein"));
  ""
};

residuealong(A, B, g, r) = {
  if (B % g == 0, return((A - r*deriv(B, x)) % g == 0));
  poldegree(gcd(B, g)) == 0 && r == 0
};
disagreement(a, b, W, g, r, s, p) = {
  my(q = logder(W), w);
  if (r == s, return("equal residues"));
  if (!residuealong(a, b, g, r), return("residue of the equation"));
  if (!residuealong(numerator(q), denominator(q), g, s), return("residue of the form"));
  if (!isprime(p) || lead(g) % p == 0, return("prime"));
  for (i = 1, #W,
    w = W[i][1];
    while (poldegree(w) > 0 && w % g == 0, w = w/g);
    if (!coprimemod(w, g, p), return("order along the factor")));
  ""
};

radical(b) = my(r = b/gcd(b, deriv(b, x))); if (poldegree(r) <= 0, 1, r/content(r));
good(b, p) = lead(b) % p != 0 && (poldegree(radical(b)) <= 1 || poldisc(radical(b)) % p != 0);
pcurvature(a, b, p) = {
  my(r = (a*Mod(1, p))/(b*Mod(1, p)), d = r);
  for (i = 1, p - 1, d = deriv(d, x));
  d + r^p
};
smallest(a, b, p) = {
  forprime (q = 2, p - 1, if (good(b, q) && pcurvature(a, b, q) != 0, return(0)));
  1
};
reduced(a, b, p) = {
  my(f = a*Mod(1, p), g = b*Mod(1, p), h = gcd(f, g));
  h = h/lead(h);
  [f\h, g\h]
};
witness(a, b, p, w) = {
  my(f = reduced(a, b, p), g, s);
  if (#w == 0, return(f[1] != 0 && poldegree(f[1]) >= poldegree(f[2])));
  g = w[1]*Mod(1, p);
  if (poldegree(g) < 1, return(0));
  if (#w == 1, return(f[2] % g^2 == 0));
  s = w[2]*Mod(1, p);
  f[2] % g == 0 && poldegree(gcd(g, deriv(f[2], x))) == 0
    && (f[1] - s*deriv(f[2], x)) % g == 0 && Mod(s, g)^p != Mod(s, g)
};

decomposed(b, D) = {
  if (sum(i = 1, #D, poldegree(D[i][1])*D[i][2]) != poldegree(b), return(0));
  if (poldegree(b/prod(i = 1, #D, D[i][1]^D[i][2])) != 0, return(0));
  if (denominator(content(b/prod(i = 1, #D, D[i][1]^D[i][2]))) != 1, return(0));
  issquarefree(prod(i = 1, #D, D[i][1]))
};
multiplepoles(b, M) = {
  my(F = factor(b), P = 1, n);
  for (i = 1, matsize(F)[1],
    if (poldegree(F[i, 1]) < 1 || F[i, 2] < 2, next);
    P *= F[i, 1];
    n = sum(j = 1, #M, M[j][1] % F[i, 1] == 0 && M[j][2] == F[i, 2]);
    if (n != 1, return(0)));
  constant(P/prod(j = 1, #M, M[j][1]))
};
irrationals(a, b, J) = {
  my(g, R, q);
  for (i = 1, #J,
    g = J[i][1]; R = J[i][2]; q = J[i][3];
    if (b % g != 0 || poldegree(gcd(g, deriv(b, x))) > 0, return(0));
    if (subst(R, x, Mod(a, g)/Mod(deriv(b, x), g)) != 0, return(0));
    if (#nfroots(, R) > 0, return(0));
    if (!isprime(q) || lead(R) % q == 0 || #polrootsmod(R, q) > 0, return(0)));
  1
};
frobenius(a, b, q) = {
  my(R = polresultant(b, a - z*deriv(b, x), x));
  lcm(apply(f -> poldegree(f, z), factormod(R, q)[, 1]~))
};
density(a, b, bound, W) = {
  if (poldegree(a) >= poldegree(b) || !issquarefree(b), return(bound == 1 && #W == 0));
  for (i = 1, #W,
    if (!isprime(W[i][1]) || !good(b, W[i][1]), return(0));
    if (frobenius(a, b, W[i][1]) != W[i][2], return(0)));
  bound == max(1/2, 1 - 1/lcm(apply(w -> w[2], W)))
};

refutation(a, b, D, l, Q, M, J, p, w, c, bound, W) = {
  if (isalgebraic(a, b), return("transcendence"));
  if (!decomposed(b, D), return("decomposition"));
  if (!isprime(l) || lead(b) % l == 0 || !coprimemod(a, b, l), return("lowest terms"));
  if (poldegree(gcd(a, b)) > 0, return("common factor"));
  if (p > 1000, return("counter-prime too large to be judged"));
  if (!isprime(p) || !good(b, p) || pcurvature(a, b, p) == 0, return("counter-prime"));
  if (!smallest(a, b, p), return("smallest"));
  if (!witness(a, b, p, w), return("witness"));
  if (#Q == 0, if (poldegree(a) >= poldegree(b), return("no polynomial part")),
    if (Q[1] != a\b || Q[1] == 0, return("polynomial part")));
  if (!multiplepoles(b, M), return("multiple poles"));
  if (!irrationals(a, b, J), return("irrational residues"));
  if (#c > 0 && subst(c[1], x, x^p)*Mod(1, p)/reduced(a, b, p)[2]^p != pcurvature(a, b, p),
    return("p-curvature"));
  if (!density(a, b, bound, W), return("density"));
  ""
};

verdict(a, b, asserts, C, word, kind) = {
  my(alg = isalgebraic(a, b), fits = (#C == 0 || logder(C[1]) == a/b), holds);
  holds = if (asserts == "algebraic", alg && fits, !alg);
  if (kind != if (!alg, "no-algebraic-solution", fits, "algebraic-solution",
    "closed-form-disagrees"), return("kind"));
  if (word != if (holds, "proved", "refuted"), return("verdict"));
  ""
};
