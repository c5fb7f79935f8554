package org.sweeptally.bench;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.util.Arrays;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.region.wire.Wire;

/** Keeps {@link OperatorBench} from rotting: it runs, small, and what comes out is printed and looked at. */
class OperatorBenchTest {

    @TempDir
    private Path folder;

    @Test
    void floorAndOperatorMakeACountOfEveryScanInEveryRegion() throws Exception {
        OperatorBench bench = new OperatorBench(folder);
        double floor = bench.throughput(false, 5, 1, 40);
        double operator = bench.throughput(true, 5, 1, 40);
        System.out.println("operator bench, 40 scans of 5: floor " + floor + ", operator " + operator
                + " parts/s, digest of a part " + digest());
        assertThat(floor).isPositive();
        assertThat(operator).isPositive();
    }

    @Test
    void aSecondStartSaysHowLongTheTailWas() throws Exception {
        List<OperatorBench.Recovered> recovered = new OperatorBench(folder).recovery(5, 30);
        System.out.println("operator bench, recovery after 30 scans: " + recovered);
        assertThat(recovered).extracting(OperatorBench.Recovered::partition).containsExactlyInAnyOrder(0, 1);
        assertThat(recovered).allSatisfy(partition -> assertThat(partition.entries()).isGreaterThanOrEqualTo(30));
    }

    private static int digest() {
        return Arrays.hashCode(Wire.encode(new BenchScans(50, 1).next(0, 2.5)));
    }
}
