package org.sweeptally.stream.attack;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import org.apache.kafka.clients.producer.KafkaProducer;
import org.apache.kafka.clients.producer.ProducerRecord;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.site.Site;

/** A record in the region log that the operator has not written. */
class PoisonTest {

    @TempDir
    private Path folder;

    @Test
    void aStrangeRecordInTheRegionLogEndsEveryProcessWithOneSentence() throws Exception {
        AttackedSite attacked = new AttackedSite(folder);
        attacked.createTopics();
        Path file = attacked.first();
        Site site = AttackedSite.read(file);
        String counts = attacked.names().counts();
        try (Feeder feeder = new Feeder(site, attacked.names().detections(), 5, 10).start();
                OperatorProcess operator = OperatorProcess.start(attacked, file, folder.resolve("state"))) {
            Waiting.untilMore(operator, counts, 20);
            poison(attacked);
            endsWithOneSentence(operator);
            int before = Bus.committed(counts).size();
            try (OperatorProcess again = OperatorProcess.start(attacked, file, folder.resolve("state"))) {
                endsWithOneSentence(again);
            }
            // The other partition may have gone on a little; what is there follows from the log all the same.
            assertThat(Bus.committed(counts).size()).isGreaterThanOrEqualTo(before);
            Committed committed = new Committed(attacked.names());
            PictureCheck.followsFromItsLog(committed);
            System.out.println("PoisonTest: 1 strange record, 2 processes ended with exit code 1; "
                    + PictureCheck.compared(committed));
            feeder.end();
        }
    }

    private static void poison(AttackedSite attacked) {
        try (KafkaProducer<byte[], byte[]> producer = new KafkaProducer<>(Bus.clients().producer("stranger"))) {
            producer.send(new ProducerRecord<>(attacked.names().regionLog(), 0,
                    "skell-mouth".getBytes(StandardCharsets.UTF_8), "strange".getBytes(StandardCharsets.UTF_8)));
        }
    }

    private static void endsWithOneSentence(OperatorProcess operator) throws InterruptedException {
        assertThat(operator.exitCode(Waiting.PATIENCE)).as(operator.text()).isEqualTo(1);
        assertThat(operator.said()).filteredOn(line -> line.startsWith("sweeptally: ")).singleElement().asString()
                .contains("offset ", "partition 0 of the region log", "nothing after it was used");
        assertThat(operator.text()).doesNotContain("\tat ");
    }
}
