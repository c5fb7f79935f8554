package org.sweeptally.filter.association;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import org.sweeptally.filter.association.DenseAssociation.Answer;

/**
 * Worked cases. Exact values are fractions: the summed weight is the rectangular permanent of [W / c | diag(d)] (Minc
 * 1978, Permanents; Ryser 1963, Combinatorial Mathematics; from memory), enumerated in rationals. Those of belief
 * propagation are the fixed point of Williams and Lau 2014, IEEE TAES 50(4):2942-2959 (formulas from memory).
 */
class WorkedCasesTest {
    private static final double EXACT_TOLERANCE = 1e-12;
    private static final double PROPAGATED_TOLERANCE = 1e-10;

    /** Rows of p, each with missed at its end; nobody's; Z; then rows of belief propagation, null where the same. */
    private record Case(
            String name, DenseAssociation problem, double[][] exact, double[] nobody, double z, double[][] propagated) {
        @Override
        public String toString() {
            return name;
        }
    }

    private static double[] r(double... values) {
        return values;
    }

    private static double[] over(double divisor, double... values) {
        double[] result = values.clone();
        for (int k = 0; k < result.length; k++) {
            result[k] /= divisor;
        }
        return result;
    }

    private static double[][] repeated(int times, double... row) {
        double[][] rows = new double[times][];
        java.util.Arrays.setAll(rows, k -> row.clone());
        return rows;
    }

    private static double[] filled(int length, double value) {
        double[] row = new double[length];
        java.util.Arrays.fill(row, value);
        return row;
    }

    private static double[] withLast(double[] row, double last) {
        double[] result = java.util.Arrays.copyOf(row, row.length + 1);
        result[row.length] = last;
        return result;
    }

    static Stream<Case> cases() {
        List<Case> cases = new ArrayList<>();
        cases.add(new Case("A", DenseAssociation.ofRatios(r(9)), new double[][] {r(.9, .1)}, r(.1), 10, null));
        cases.add(new Case("B", DenseAssociation.ofRatios(r(5, 2, .5)),
                new double[][] {over(17, 10, 4, 1, 2)}, over(17, 7, 13, 16), 8.5, null));
        cases.add(new Case("C", DenseAssociation.ofRatios(r(1, 1), r(1, 1)),
                repeated(2, over(7, 2, 2, 3)), over(7, 3, 3), 7,
                repeated(2, .27639320225002, .27639320225002, .44721359549996)));
        cases.add(new Case("D", DenseAssociation.ofRatios(r(4, .5), r(3, 2)),
                new double[][] {over(10, 6, 1, 3), over(40, 9, 20, 11)}, over(40, 7, 16), 20,
                new double[][] {
                    r(.60660035817781, .073598567288779, .31980107453342),
                    r(.20684901501104, .5, .29315098498896)
                }));
        cases.add(new Case("E", DenseAssociation.ofRatios(r(10, 3, .5), r(2, 8, 1), r(1, 4, 6)),
                new double[][] {
                    r(15. / 19, 3. / 38, 1. / 57, 13. / 114),
                    r(23. / 304, 79. / 114, 31. / 456, 149. / 912),
                    r(41. / 1824, 17. / 152, 55. / 76, 259. / 1824)
                },
                r(205. / 1824, 53. / 456, 29. / 152), 912,
                new double[][] {
                    r(.80816712241986, .053077449209819, .013350480921046, .12540494744928),
                    r(.048747111843453, .72262126854966, .041086687526248, .18754493208064),
                    r(.01945984202888, .09070678266804, .73548745816204, .15434591714104)
                }));
        cases.add(new Case("F tree", DenseAssociation.ofRatios(r(6, 2, 0), r(0, 5, 3), r(0, 0, 7)),
                new double[][] {over(379, 306, 22, 0, 51), over(379, 0, 280, 27, 72), over(379, 0, 0, 308, 71)},
                over(379, 73, 77, 44), 379, null));
        cases.add(new Case("G", DenseAssociation.ofRatios(r(1000, 999), r(999, 1000)),
                new double[][] {r(.5, 999. / 2002, 1. / 1001), r(999. / 2002, .5, 1. / 1001)},
                r(1. / 1001, 1. / 1001), 2002000,
                new double[][] {
                    r(.5, .48418861169916, .01581138830084), r(.48418861169916, .5, .01581138830084)
                }));
        cases.add(new Case("H", new DenseAssociation(
                new double[][] {r(4.5, 1), r(.9, 2.7), r(.01, 1.8)}, r(.1, .2, .3), r(.5, .75)),
                new double[][] {
                    r(109350. / 120307, 6040. / 120307, 447. / 10937),
                    over(120307, 9045, 73764, 37498),
                    over(120307, 97, 36000, 84210)
                },
                r(165. / 10937, 4503. / 120307), 120307. / 20000,
                new double[][] {
                    r(.93330703627949, .023427260399643, .043265703320867),
                    r(.049980073427886, .61997822670606, .33004169986606),
                    r(.00072768273070456, .31693534504233, .68233697222696)
                }));
        cases.add(new Case("I 6x6", DenseAssociation.ofRatios(repeated(6, filled(6, 1))),
                repeated(6, withLast(filled(6, 1546. / 13327), 4051. / 13327)), filled(6, 4051. / 13327), 13327,
                repeated(6, withLast(filled(6, .11374897709519), .31750613742885))));
        cases.add(new Case("J", new DenseAssociation(
                new double[][] {r(7, 1, 0), r(.5, 6, 2), r(0, 3, 5), r(.2, .2, .2)}, r(.1, .1, .5, .9), r(1, .25, 2)),
                new double[][] {
                    r(185185. / 191703, 9040. / 575109, 0, 10514. / 575109),
                    r(12715. / 1150218, 156680. / 191703, 85165. / 575109, 9031. / 383406),
                    r(0, 28688. / 191703, 43715. / 63901, 31870. / 191703),
                    r(2360. / 575109, 4664. / 575109, 9590. / 575109, 62055. / 63901)
                },
                r(21673. / 1150218, 589. / 63901, 28973. / 191703), 287.5545,
                new double[][] {
                    r(.97200124367895, .0090281816508403, 0, .018970574670208),
                    r(.0030922406991797, .90604646736094, .060777593300752, .030083698639126),
                    r(0, .062921599385026, .72870449837474, .20837390224024),
                    r(.00441250134778, .010213553174239, .0207683760676, .96460556941038)
                }));
        cases.add(new Case("K", DenseAssociation.ofRatios(repeated(2, filled(3, 10))),
                repeated(2, over(661, 210, 210, 210, 31)), over(661, 241, 241, 241), 661,
                repeated(2, .31402805294714, .31402805294714, .31402805294714, .057915841158594)));
        return cases.stream();
    }

    @ParameterizedTest
    @MethodSource("cases")
    void exactMarginalsAreTheFractions(Case given) {
        Answer answer = given.problem().solve(DenseAssociation.EXACT);
        compareRows(answer, given.exact(), EXACT_TOLERANCE);
        assertThat(answer.nobody()).containsExactly(given.nobody(), within(EXACT_TOLERANCE));
        assertThat(answer.logWeight()).isCloseTo(StrictMath.log(given.z()), within(EXACT_TOLERANCE));
        assertThat(answer.counts().propagated()).isZero();
    }

    @ParameterizedTest
    @MethodSource("cases")
    void turnedCasesHaveTheSameMarginals(Case given) {
        Answer answer = given.problem().turned().solve(DenseAssociation.EXACT);
        for (int i = 0; i < given.exact().length; i++) {
            for (int j = 0; j < given.nobody().length; j++) {
                assertThat(answer.p()[j][i]).isCloseTo(given.exact()[i][j], within(EXACT_TOLERANCE));
            }
        }
        assertThat(answer.missed()).containsExactly(given.nobody(), within(EXACT_TOLERANCE));
    }

    @ParameterizedTest
    @MethodSource("cases")
    void beliefPropagationReachesItsFixedPoint(Case given) {
        Answer answer = given.problem().propagate(100_000);
        compareRows(answer, given.propagated() == null ? given.exact() : given.propagated(), PROPAGATED_TOLERANCE);
        assertThat(answer.counts().sweepCapHits()).isZero();
    }

    /** Two tracks, three detections, uniform clutter and undetected intensity: one update of Williams 2015, by hand. */
    @Test
    void oneCompleteScanHasItsEnumeratedMarginals() {
        double[][] w = {
            r(.116232642627506, .025935008163951, 5.4573e-19), r(.019451256122963, .087174481970630, 1.63002e-11)
        };
        Answer answer = new DenseAssociation(w, r(.28, .46), filled(3, .0245)).solve(DenseAssociation.EXACT);
        compareRows(answer, new double[][] {
            r(.87695256947579, .061063539364556, 4.93e-18, .061983891159652),
            r(.048889096434625, .82239050165926, 1.86173e-10, .12872040171994)
        }, 1e-10);
        double[] nobody = {.074158334089583, .11654595897618, .99999999981383};
        assertThat(answer.nobody()).containsExactly(nobody, within(1e-10));
        assertThat(answer.logWeight()).isCloseTo(-8.048203871413222, within(1e-10));
        assertThat(answer.p()[0][2] / 4.93e-18).isCloseTo(1, within(1e-3));
    }

    /** One component among clutter: Ristic, Vo, Vo, Farina 2013, IEEE TSP 61(13), from memory; r = 0.5, P_D = 0.9. */
    @Test
    void aLoneComponentsExistenceFollowsTheBernoulliFilter() {
        double[][] ratios = {{}, {1}, {10}, {100}, {10, 2}, {.1}};
        double[] expected = {1. / 11, .5, .900990099009901, .9890230515916575, .9159663865546218, .1596638655462185};
        for (int k = 0; k < ratios.length; k++) {
            double[] w = over(1 / .45, ratios[k]);
            Answer answer = new DenseAssociation(new double[][] {w}, r(1 - .45), filled(w.length, 1))
                    .solve(DenseAssociation.EXACT);
            double existence = 1 - answer.missed()[0] * .5 / .55;
            assertThat(existence).isCloseTo(expected[k], within(1e-14));
        }
    }

    /** OEIS A002720, the number of partial matchings of n with n (from memory): all weights 1. */
    @Test
    void unitWeightsCountTheEvents() {
        double[] counts = {2, 7, 34, 209, 1546, 13327, 130922, 1441729};
        for (int n = 1; n <= counts.length; n++) {
            DenseAssociation ones = DenseAssociation.ofRatios(repeated(n, filled(n, 1)));
            double z = StrictMath.exp(ones.solve(DenseAssociation.EXACT).logWeight());
            assertThat(z).isCloseTo(counts[n - 1], within(1e-12 * counts[n - 1]));
            if (n <= 6) {
                assertThat((double) EnumeratedAssociation.events(ones)).isEqualTo(counts[n - 1]);
            }
        }
    }

    private static void compareRows(Answer answer, double[][] expected, double tolerance) {
        for (int i = 0; i < expected.length; i++) {
            assertThat(withLast(answer.p()[i], answer.missed()[i])).containsExactly(expected[i], within(tolerance));
        }
    }
}
