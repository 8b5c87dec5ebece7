"""Times of scientific Python on the same data as the product's steps, as JSON on standard output. Data: a folder of float64 columns."""
import json, os, sys, time
for name in ('OPENBLAS_NUM_THREADS', 'OMP_NUM_THREADS', 'MKL_NUM_THREADS'):
    os.environ[name] = '1'
import numpy as np
import scipy
from scipy.ndimage import correlate1d, median_filter
from scipy.optimize import curve_fit
from scipy.signal import find_peaks

folder = sys.argv[1]
task = json.load(open(os.path.join(folder, 'task.json')))
column = lambda name: np.fromfile(os.path.join(folder, name + '.f64'))
wave, flux, sigma = column('wavelength'), column('flux'), column('sigma')


def timed(run, repeats=5):
    run()
    times = []
    for _ in range(repeats):
        began = time.process_time()
        result = run()
        times.append((time.process_time() - began) * 1e3)
    return sorted(times)[repeats // 2], result


def planck(nm, kelvin, scale):
    return scale * (500 / nm) ** 5 / np.expm1(1.438776877e7 / (nm * kelvin * 1e4))


def planck_once():
    return curve_fit(planck, wave, flux, p0=(0.8, np.median(flux)), sigma=sigma)[0]


def planck_clipped():
    used, p = np.ones(len(flux), bool), (0.8, np.median(flux))
    for _ in range(12):
        p = curve_fit(planck, wave[used], flux[used], p0=p, sigma=sigma[used])[0]
        rest = (flux - planck(wave, *p)) / sigma
        kept = (rest > -2) & (rest < 3)
        if (kept == used).all():
            break
        used = kept
    return p


def gauss(x, depth, centre, width):
    return 1 - depth * np.exp(-0.5 * ((x - centre) / width) ** 2)


def line_fits():
    out = []
    for k, (centre, depth, width) in enumerate(task['lines']):
        part = slice(task['samples'] * k, task['samples'] * (k + 1))
        out.append(curve_fit(gauss, lines_x[part], lines_y[part], p0=(depth, centre, width), sigma=lines_s[part])[0])
    return out


def detection():
    found = 0
    for width in task['widths']:
        half = int(np.ceil(3.6 * width))
        kernel = np.exp(-0.5 * (np.arange(-half, half + 1) / width) ** 2)
        kernel -= kernel.mean()
        s = correlate1d(residual, kernel / np.sqrt((kernel ** 2).sum()), mode='constant')
        found += len(find_peaks(s, height=4.5)[0]) + len(find_peaks(-s, height=4.5)[0])
    return found


lines_x, lines_y, lines_s = column('lines-x'), column('lines-y'), column('lines-s')
residual = column('residual')
answer = {'versions': 'numpy %s, scipy %s' % (np.__version__, scipy.__version__)}
ms, p = timed(planck_once)
answer['planck'] = {'ms': ms, 'temperatureK': p[0] * 1e4}
answer['planckClipped'] = {'ms': timed(planck_clipped, 3)[0]}
answer['lines'] = {'ms': timed(line_fits, 3)[0]}
answer['detection'] = {'ms': timed(detection)[0]}
for window in task['windows']:
    answer['median%d' % window] = {'ms': timed(lambda: median_filter(flux, window), 3)[0], 'by': 'scipy median_filter'}
    try:
        import bottleneck
        answer['median%d' % window] = {'ms': timed(lambda: bottleneck.move_median(flux, window))[0], 'by': 'bottleneck move_median'}
    except ImportError:
        pass
print(json.dumps(answer))
