use mainspring::algebra::field::*;
use mainspring::algebra::generator::*;
use mainspring::algebra::monomial::Var;
use mainspring::algebra::number::rational;
use mainspring::algebra::polynomial::Poly;
use std::time::Instant;
fn main() {
    let n: usize = std::env::args().nth(1).unwrap().parse().unwrap();
    let t0 = Instant::now();
    let f = Field::new();
    let p: Vec<Var> = (0..n).map(|i| f.symbol(&format!("p{i}"), Role::Price)).collect();
    let m = f.symbol("m", Role::Income);
    let a: Vec<Poly> = (0..n).map(|i| Poly::var(f.symbol(&format!("a{i}"), Role::Parameter))).collect();
    let b: Vec<Poly> = (0..n).map(|i| Poly::var(f.symbol(&format!("b{i}"), Role::Parameter))).collect();
    let lam: Vec<Poly> = (0..n).map(|i| Poly::var(f.symbol(&format!("l{i}"), Role::Parameter))).collect();
    let mut g = vec![vec![Poly::zero(); n]; n];
    for i in 0..n - 1 {
        for j in i..n - 1 {
            let v = Poly::var(f.symbol("g", Role::Parameter));
            g[i][j] = v.clone();
            g[j][i] = v;
        }
    }
    for i in 0..n - 1 {
        let s = f.named(&Poly::sum(g[i][..n - 1].to_vec()).neg(), None);
        g[i][n - 1] = s.clone();
        g[n - 1][i] = s;
    }
    let s = f.named(&Poly::sum(g[n - 1][..n - 1].to_vec()).neg(), None);
    g[n - 1][n - 1] = s;
    let mut a = a;
    let s = Poly::sum(a[..n - 1].to_vec());
    a[n - 1] = f.named(&(&Poly::one() - &s), None);
    let mut b = b;
    b[n - 1] = f.named(&Poly::sum(b[..n - 1].to_vec()).neg(), None);
    let mut lam = lam;
    lam[n - 1] = f.named(&Poly::sum(lam[..n - 1].to_vec()).neg(), None);
    let lp: Vec<Poly> = p.iter().map(|v| f.ln(&Poly::var(*v)).unwrap()).collect();
    let lm = f.ln(&Poly::var(m)).unwrap();
    let mut parts = vec![];
    for i in 0..n {
        parts.push(f.product(&a[i], &lp[i]));
        for j in 0..n {
            parts.push(f.product(&f.product(&g[i][j], &lp[i]), &lp[j]).scale(&rational(1, 2)));
        }
    }
    let lnp = f.named(&Poly::sum(parts), Some("lnP"));
    let z = f.named(&(&lm - &lnp), None);
    let quad = std::env::args().nth(2).is_some();
    let bp = if quad {
        let mut e = Poly::zero();
        for i in 0..n {
            e = &e + &f.product(&b[i], &lp[i]);
        }
        let e = f.exp(&e).unwrap();
        Some(f.quotient(&f.product(&z, &z), &e).unwrap())
    } else {
        None
    };
    let w: Vec<Poly> = (0..n)
        .map(|i| {
            let mut parts = vec![a[i].clone(), f.product(&b[i], &z)];
            for j in 0..n {
                parts.push(f.product(&g[i][j], &lp[j]));
            }
            if let Some(q) = &bp {
                parts.push(f.product(&lam[i], q));
            }
            Poly::sum(parts)
        })
        .collect();
    eprintln!("build {:?} vars {} len w0 {} wn {}", t0.elapsed(), f.len(), w[0].len(), w[n - 1].len());
    let t1 = Instant::now();
    let add = f.is_zero(&(&Poly::sum(w.clone()) - &Poly::one()));
    eprintln!("adding-up {add} {:?}", t1.elapsed());
    let t1 = Instant::now();
    let wm: Vec<Poly> = w.iter().map(|w| f.log_derivative(w, m)).collect();
    eprintln!("wm {:?}", t1.elapsed());
    let mut t: Vec<Vec<Poly>> = vec![];
    let mut terms = 0;
    for i in 0..n {
        let g = f.log_gradient(&w[i], &p);
        let row: Vec<Poly> = (0..n).map(|j| &g[j] + &(&w[j] * &wm[i])).collect();
        terms += row.iter().map(|x| x.len()).sum::<usize>();
        t.push(row);
    }
    eprintln!("matrix {:?} terms {terms}", t1.elapsed());
    let mut ok = true;
    for i in 0..n {
        for j in 0..i {
            ok &= f.is_zero(&(&t[i][j] - &t[j][i]));
        }
    }
    eprintln!("symmetry {ok} {:?}", t1.elapsed());
    let t1 = Instant::now();
    let mut ok = true;
    let mut all = p.clone();
    all.push(m);
    let sc = mainspring::algebra::derivation::Scale::new(&all);
    for i in 0..n {
        ok &= f.is_zero(&f.euler(&w[i], &sc));
    }
    eprintln!("hom {ok} {:?}", t1.elapsed());
}
