default(recover, 0);
default(parisizemax, 10^9);
passed = 0;
failed = 0;
verdict(title, good) =
{
  if(good, passed++; print("ok ", title), failed++; print("FAILED ", title));
}
\\ A rational number.
c(a, b = 1) = a/b;
add(terms) = sum(i = 1, #terms, terms[i]);
\\ The derivation of the ring.
D(e) = sum(i = 1, #X, deriv(e, X[i])*DX[i]);
\\ The sum of numerator/denominator*term over all parts, as numerator and denominator.
form(parts) =
{
  my(n = 0, d = 1, p);
  for(i = 1, #parts,
    p = parts[i];
    if(p[2] == 1, n += p[1]*p[3]*d, n = n*p[2] + p[1]*p[3]*d; d *= p[2]));
  [n, d];
}
derivative(f) = [D(f[1])*f[2] - f[1]*D(f[2]), f[2]^2];
agrees(f, target) = f[1] == target*f[2];
side(parts, known) = if(known, derivative(form(parts)), form(parts));
\\ Are the coefficients free of the variable, if the claim is about constants?
steady(parts, kind) =
{
  if(kind != "constant", return(1));
  for(i = 1, #parts, for(j = 1, 2, for(l = 1, #V, if(deriv(parts[i][j], V[l]) != 0, return(0)))));
  1;
}
\\ Are the coefficients of the kind that the claim asks for?
admitted(parts, kind) =
{
  if(kind != "rational", for(i = 1, #parts, if(parts[i][2] != 1, return(0))));
  steady(parts, kind);
}
\\ Is a quotient in lowest terms a polynomial?
integral(f) =
{
  my(t = type(f));
  if(t == "t_INT" || t == "t_FRAC", return(1));
  if(t != "t_POL", return(0));
  f = Vec(f);
  for(i = 1, #f, if(!integral(f[i]), return(0)));
  1;
}
\\ The coefficient of a monomial in the first symbols, as an element in the others.
row(e, m) =
{
  for(i = 1, #m, e = polcoef(e, m[i], X[i]));
  e;
}
combine(e, rows) = sum(k = 1, #rows, rows[k][2]*row(e, rows[k][1]));
\\ What the equations compare: the terms, their derivatives, or both by turns.
columns(terms, known) =
{
  if(known == 2, return(concat(vector(#terms, i, [D(terms[i]), terms[i]]))));
  if(known, vector(#terms, i, D(terms[i])), terms);
}
\\ Ranks are those modulo a prime at a point: never too large, and too small with a chance of about degree/2^61.
P = 2^61 - 1;
setrand(1);
at(e, point) = for(i = 1, #X, e = subst(e, X[i], point[i])); Mod(1, P)*e;
\\ The dimension of the span over the rational functions of all but the first k symbols, which take a value for each row.
span(elements, k) =
{
  my(n = #elements, m, point);
  m = matrix(n, n);
  for(i = 1, n,
    point = vector(#X, s, if(s <= k, Mod(random(P), P), Z[s]));
    for(j = 1, n, m[i, j] = at(elements[j], point)));
  matrank(m);
}
\\ Is there no other form? Two forms with one derivative differ by a constant.
unique(terms, known, k) =
{
  if(known == 2, return(span(concat([c(1)], terms), k) == #terms + 1));
  span(columns(terms, known), k) == #terms;
}
\\ Is the determinant of the elements on these rows not 0 modulo the prime at the point?
independent(elements, rows, prime, point) =
{
  if(prime < 3 || !isprime(prime) || #rows != #elements, return(0));
  iferr(matdet(matrix(#rows, #elements, i, j, Mod(substvec(row(elements[j], rows[i]), X, point), prime))) != 0, E, 0);
}
\\ The recorded form of an element, whose derivative must be the target.
primitive(title, target, terms, known, k, parts) =
{
  my(f = form(parts));
  verdict(title, f[2] == 1 && D(f[1]) == target && unique(terms, known, k));
  f[1];
}
holds(title, target, terms, known, k, kind, parts) =
{
  verdict(title, admitted(parts, kind) && agrees(side(parts, known), target) && unique(terms, known, k));
}
\\ Each form of the kernel has a part for every term; the one form that ones may hold is 1.
family(title, target, terms, known, k, kind, particular, kernel, ones) =
{
  my(good, dimension, shifted);
  good = agrees(side(particular, known), target) && steady(particular, kind);
  for(i = 1, #kernel,
    good = good && steady(kernel[i], kind) && if(known == 1, side(kernel[i], known), form(kernel[i]))[1] == 0);
  if(good && #kernel,
    good = matrank(matrix(#kernel, #terms, i, j, at(kernel[i][j][1], Z)/at(kernel[i][j][2], Z))) == #kernel);
  dimension = span(if(known == 2, terms, columns(terms, known)), k);
  shifted = known == 2 && span(concat([c(1)], terms), k) == dimension;
  good = good && #kernel == #terms - dimension && #ones == shifted && #kernel + #ones > 0;
  for(i = 1, #ones, good = good && agrees(form(ones[i]), c(1)));
  verdict(title, good);
}
contradiction(title, target, terms, known, k, kind, rows, value) =
{
  my(compared = columns(terms, known), good, occurs);
  good = #Set(vector(#rows, i, rows[i][1])) == #rows;
  for(i = 1, #rows,
    occurs = row(target, rows[i][1]) != 0;
    for(j = 1, #compared, occurs = occurs || row(compared[j], rows[i][1]) != 0);
    good = good && occurs);
  for(i = 1, #compared, good = good && combine(compared[i], rows) == 0);
  verdict(title, good && combine(target, rows) == value && value != 0);
}
other(title, target, terms, known, k, kind, parts, rows, prime, point) =
{
  my(strange = 0, witnessed);
  for(i = 1, #parts, strange = strange || !integral(parts[i][1]/parts[i][2]));
  witnessed = independent(columns(terms, known), rows, prime, point);
  witnessed = witnessed || (known == 2 && independent(concat([c(1)], terms), rows, prime, point));
  strange = strange && kind != "rational" && steady(parts, kind) && witnessed;
  verdict(title, strange && agrees(side(parts, known), target) && unique(terms, known, k));
}
\\ Each pair holds the coefficients p of the derivative of a term, and r of the term.
no_primitive(title, target, terms, known, k, kind, pairs, rows, prime, point) =
{
  my(compared = columns(terms, known), parts = [], differs = 0, p, r, f);
  for(i = 1, #pairs,
    p = pairs[i][1];
    r = pairs[i][2];
    parts = concat(parts, [[p[1], p[2], D(terms[i])], [r[1], r[2], terms[i]]]);
    f = derivative(p);
    differs = differs || f[1]*r[2] != r[1]*f[2]);
  verdict(title, known == 2 && differs && agrees(form(parts), target) && independent(compared, rows, prime, point));
}
