package org.sweeptally.world;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.SplittableRandom;
import java.util.TreeMap;
import org.junit.jupiter.api.Test;
import org.sweeptally.demo.Chance;

/** The simulated world is what it says it is, or nothing measured on it would mean anything. */
class SimulatedWorldTest {

    private static final WorldSettings WORLD = WorldSettings.fourKilometres(200, 30);

    @Test
    void theSquareHoldsAsManyObjectsAtTheEndAsAtTheBeginning() {
        int runs = 200;
        double[] sum = new double[WORLD.scans()];
        for (long seed = 1; seed <= runs; seed++) {
            List<SimulatedScan> scans = SimulatedWorld.scans(WORLD, seed);
            for (int k = 0; k < scans.size(); k++) {
                sum[k] += scans.get(k).truth().size();
            }
        }
        // The number is Poisson at any time (superposition and thinning: Kingman 1993, from memory); 4 standard errors.
        double tolerance = 4 * Math.sqrt(WORLD.objects() / runs);
        for (int k : new int[] {0, 20, 40, 59}) {
            assertThat(sum[k] / runs).as("scan %s of seeds 1 to %s", k, runs).isCloseTo(20, within(tolerance));
        }
    }

    @Test
    void detectionsAreAsManyAndAsExactAsStated() {
        long chances = 0;
        long detected = 0;
        long clutter = 0;
        double squares = 0;
        int scans = 0;
        for (long seed = 1; seed <= 20; seed++) {
            for (SimulatedScan scan : SimulatedWorld.scans(WORLD, seed)) {
                scans++;
                TreeMap<Integer, TrueObject> byId = new TreeMap<>();
                scan.objects().forEach(object -> byId.put(object.id(), object));
                chances += scan.objects().stream().filter(TrueObject::seen).count();
                for (SimulatedScan.Detection z : scan.detections()) {
                    if (z.object() == SimulatedScan.CLUTTER) {
                        clutter += WORLD.holds(z.east(), z.north()) ? 1 : 0;
                    } else {
                        detected++;
                        double east = z.east() - byId.get(z.object()).east();
                        double north = z.north() - byId.get(z.object()).north();
                        squares += (east * east + north * north) / (2 * 225.0);
                    }
                }
            }
        }
        assertThat((double) detected / chances)
                .as("seeds 1 to 20")
                .isCloseTo(0.9, within(4 * Math.sqrt(0.09 / chances)));
        assertThat((double) clutter / scans).as("seeds 1 to 20").isCloseTo(30, within(4 * Math.sqrt(30.0 / scans)));
        assertThat(squares / detected).as("seeds 1 to 20").isCloseTo(1, within(4 / Math.sqrt(detected)));
    }

    /**
     * Continuous white noise acceleration over t: variances q t and q t^3 / 3, covariance q t^2 / 2 (Bar-Shalom et al.
     * 2001).
     */
    @Test
    void objectsMoveAsTheFilterBelieves() {
        WorldSettings shaken = new WorldSettings(4000, 200, 200, 600, 2, 6, 3, 2, 15, 0.9, 0);
        double[] sums = new double[3];
        long n = 0;
        for (long seed = 1; seed <= 20; seed++) {
            List<SimulatedScan> scans = SimulatedWorld.scans(shaken, seed);
            TreeMap<Integer, TrueObject> before = new TreeMap<>();
            scans.get(0).objects().forEach(object -> before.put(object.id(), object));
            for (TrueObject now : scans.get(1).objects()) {
                TrueObject then = before.get(now.id());
                if (then != null) {
                    double place = now.east() - then.east() - 3 * then.eastVelocity();
                    double speed = now.eastVelocity() - then.eastVelocity();
                    sums[0] += place * place;
                    sums[1] += place * speed;
                    sums[2] += speed * speed;
                    n++;
                }
            }
        }
        double relative = 5 * Math.sqrt(2.0 / n);
        assertThat(sums[0] / n).as("seeds 1 to 20").isCloseTo(18, within(18 * relative));
        assertThat(sums[1] / n).as("seeds 1 to 20").isCloseTo(9, within(9 * relative));
        assertThat(sums[2] / n).as("seeds 1 to 20").isCloseTo(6, within(6 * relative));
    }

    @Test
    void objectsDieAtTheStatedAge() {
        long alive = 0;
        long survived = 0;
        for (long seed = 1; seed <= 10; seed++) {
            List<SimulatedScan> scans = SimulatedWorld.scans(WORLD, seed);
            for (int k = 1; k < scans.size(); k++) {
                List<Integer> now = scans.get(k).objects().stream().map(TrueObject::id).toList();
                alive += scans.get(k - 1).objects().size();
                survived += scans.get(k - 1).objects().stream().filter(o -> now.contains(o.id())).count();
            }
        }
        double survival = StrictMath.exp(-2.5 / 600);
        assertThat((double) survived / alive)
                .as("seeds 1 to 10")
                .isCloseTo(survival, within(4 * Math.sqrt(survival * (1 - survival) / alive)));
    }

    @Test
    void aSeedSaysItAllAndClutterChangesNoObject() {
        List<SimulatedScan> once = SimulatedWorld.scans(WORLD, 7);
        List<SimulatedScan> again = SimulatedWorld.scans(WORLD, 7);
        List<SimulatedScan> dense = SimulatedWorld.scans(WorldSettings.fourKilometres(200, 100), 7);
        assertThat(again).isEqualTo(once);
        for (int k = 0; k < once.size(); k++) {
            assertThat(dense.get(k).objects()).isEqualTo(once.get(k).objects());
            assertThat(dense.get(k).detections().stream().filter(z -> z.object() >= 0))
                    .containsExactlyInAnyOrderElementsOf(
                            once.get(k).detections().stream().filter(z -> z.object() >= 0).toList());
        }
        assertThat(SimulatedWorld.scans(WORLD, 8)).isNotEqualTo(once);
    }

    @Test
    void numbersOfChanceHaveTheirMoments() {
        Chance chance = new Chance(new SplittableRandom(3));
        int n = 100_000;
        double[] moments = new double[4];
        double poisson = 0;
        for (int i = 0; i < n; i++) {
            double x = chance.gaussian();
            for (int power = 1; power <= 4; power++) {
                moments[power - 1] += StrictMath.pow(x, power) / n;
            }
            poisson += (double) chance.poisson(3.5) / n;
        }
        assertThat(moments[0]).as("seed 3").isCloseTo(0, within(4 / Math.sqrt(n)));
        assertThat(moments[1]).as("seed 3").isCloseTo(1, within(4 * Math.sqrt(2.0 / n)));
        assertThat(moments[2]).as("seed 3").isCloseTo(0, within(4 * Math.sqrt(15.0 / n)));
        assertThat(moments[3]).as("seed 3").isCloseTo(3, within(4 * Math.sqrt(96.0 / n)));
        assertThat(poisson).as("seed 3").isCloseTo(3.5, within(4 * Math.sqrt(3.5 / n)));
    }
}
