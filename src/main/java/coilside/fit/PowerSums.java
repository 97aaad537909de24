package coilside.fit;

/**
 * The sums of k^m q^k over k = 0..n-1 for m = 0, 1, 2 and complex q = exp(mu), in closed form; by
 * summation where the closed form would cancel.
 */
final class PowerSums {
  double re0;
  double im0;
  double re1;
  double im1;
  double re2;
  double im2;

  /**
   * @param x real part of mu
   * @param y imaginary part of mu
   */
  void compute(double x, double y, int n) {
    double qm = expm1Re(x, y);
    double qi = Math.exp(x) * Math.sin(y);
    double dr = -qm;
    double di = -qi;
    if (Math.hypot(dr, di) * n < 0.05) {
      direct(x, y, n);
      return;
    }
    double qr = 1 + qm;
    double ex = Math.exp(n * x);
    double angle = Math.IEEEremainder(n * y, 2 * Math.PI);
    double gr = ex * Math.cos(angle);
    double gi = ex * Math.sin(angle);
    double hr = -expm1Re(n * x, angle);
    double hi = -gi;
    double size = dr * dr + di * di;
    double ir = dr / size;
    double ii = -di / size;
    re0 = hr * ir - hi * ii;
    im0 = hr * ii + hi * ir;
    // S1 = (q (1 - q^n) - n q^n d)/d^2
    double ar = qr * hr - qi * hi - n * (gr * dr - gi * di);
    double ai = qr * hi + qi * hr - n * (gr * di + gi * dr);
    double i2r = ir * ir - ii * ii;
    double i2i = 2 * ir * ii;
    re1 = ar * i2r - ai * i2i;
    im1 = ar * i2i + ai * i2r;
    // S2 = (q (1 + q) (1 - q^n) - q^n n d (n d + 2 q))/d^3
    double pr = qr * (1 + qr) - qi * qi;
    double pi = qi * (1 + 2 * qr);
    double br = pr * hr - pi * hi;
    double bi = pr * hi + pi * hr;
    double ndr = n * dr;
    double ndi = n * di;
    double tr = ndr + 2 * qr;
    double ti = ndi + 2 * qi;
    double ur = ndr * tr - ndi * ti;
    double ui = ndr * ti + ndi * tr;
    br -= gr * ur - gi * ui;
    bi -= gr * ui + gi * ur;
    double i3r = i2r * ir - i2i * ii;
    double i3i = i2r * ii + i2i * ir;
    re2 = br * i3r - bi * i3i;
    im2 = br * i3i + bi * i3r;
  }

  private static double expm1Re(double x, double y) {
    double s = Math.sin(y / 2);
    return Math.expm1(x) * Math.cos(y) - 2 * s * s;
  }

  private void direct(double x, double y, int n) {
    re0 = 0;
    im0 = 0;
    re1 = 0;
    im1 = 0;
    re2 = 0;
    im2 = 0;
    for (int k = 0; k < n; k++) {
      double e = Math.exp(x * k);
      double r = e * Math.cos(y * k);
      double i = e * Math.sin(y * k);
      re0 += r;
      im0 += i;
      re1 += k * r;
      im1 += k * i;
      re2 += (double) k * k * r;
      im2 += (double) k * k * i;
    }
  }
}
