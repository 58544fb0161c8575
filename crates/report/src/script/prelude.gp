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
side(parts, by_derivative) = if(by_derivative, derivative(form(parts)), form(parts));
\\ The coefficient of a monomial in the first symbols, as an element in the others.
row(e, m) =
{
  for(i = 1, #m, e = polcoef(e, m[i], X[i]));
  e;
}
combine(e, rows) = sum(k = 1, #rows, rows[k][2]*row(e, rows[k][1]));
\\ Is the determinant of the columns on these rows not 0 modulo the prime at the point?
independent(columns, rows, prime, point) =
{
  if(!isprime(prime) || #rows != #columns, return(0));
  matdet(matrix(#rows, #columns, i, j, Mod(substvec(row(columns[j], rows[i]), X, point), prime))) != 0;
}
\\ The recorded form of an element, whose derivative must be the target.
primitive(title, target, parts) =
{
  my(f = form(parts));
  verdict(title, f[2] == 1 && D(f[1]) == target);
  f[1];
}
holds(title, target, by_derivative, parts) = verdict(title, agrees(side(parts, by_derivative), target));
family(title, target, by_derivative, particular, kernel) =
{
  my(good = agrees(side(particular, by_derivative), target) && #kernel > 0);
  for(i = 1, #kernel, good = good && #kernel[i] > 0 && side(kernel[i], by_derivative)[1] == 0);
  verdict(title, good);
}
contradiction(title, target, columns, rows, value) =
{
  my(good = combine(target, rows) == value && value != 0);
  for(i = 1, #columns, good = good && combine(columns[i], rows) == 0);
  verdict(title, good);
}
other(title, target, by_derivative, parts, columns, rows, prime, point) =
{
  my(strange = 0);
  for(i = 1, #parts, strange = strange || type(parts[i][1]/parts[i][2]) == "t_RFRAC");
  verdict(title, strange && agrees(side(parts, by_derivative), target) && independent(columns, rows, prime, point));
}
\\ Each pair holds p and r, as numerator and denominator, with the derivative of a term and the term.
no_primitive(title, target, pairs, columns, rows, prime, point) =
{
  my(parts = [], differs = 0, p, r, f);
  for(i = 1, #pairs,
    p = pairs[i][1];
    r = pairs[i][2];
    parts = concat(parts, [[p[1], p[2], pairs[i][3]], [r[1], r[2], pairs[i][4]]]);
    f = derivative(p);
    differs = differs || f[1]*r[2] != r[1]*f[2]);
  verdict(title, differs && agrees(form(parts), target) && independent(columns, rows, prime, point));
}
