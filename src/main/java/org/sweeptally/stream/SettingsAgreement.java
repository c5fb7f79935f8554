package org.sweeptally.stream;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalLong;
import java.util.function.Consumer;
import org.apache.kafka.clients.producer.KafkaProducer;
import org.apache.kafka.clients.producer.ProducerConfig;
import org.apache.kafka.clients.producer.ProducerRecord;
import org.apache.kafka.common.KafkaException;
import org.apache.kafka.common.errors.InvalidProducerEpochException;
import org.apache.kafka.common.errors.ProducerFencedException;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.intake.Times;
import org.sweeptally.region.wire.Wire;

/**
 * Brings the site file of a process and the settings that run to terms. A revision higher than all before is written to
 * the settings topic and to every region's log in one transaction; the same content is as good as written; anything
 * else is refused. Of several processes at once one writes, since all of them write under one name.
 */
final class SettingsAgreement {

    private static final int ATTEMPTS = 5;

    private final ClientSettings clients;
    private final TopicNames names;
    private final RegionPartitions regions;
    private final int partitions;
    private final Consumer<String> says;

    SettingsAgreement(
            ClientSettings clients,
            TopicNames names,
            RegionPartitions regions,
            int partitions,
            Consumer<String> says) {
        this.clients = clients;
        this.names = names;
        this.regions = regions;
        this.partitions = partitions;
        this.says = says;
    }

    /**
     * Agrees on the settings.
     *
     * @param ours the revision of this process's site file
     * @return every revision that is known then, ours among them
     * @throws SettingsRefusedException if ours does not go with what runs
     */
    List<Revision> agree(Revision ours) {
        for (int attempt = 1; ; attempt++) {
            try (KafkaProducer<byte[], byte[]> producer = new KafkaProducer<>(producerSettings())) {
                producer.initTransactions();
                return agree(ours, producer);
            } catch (ProducerFencedException | InvalidProducerEpochException e) {
                if (attempt == ATTEMPTS) {
                    throw new OperatorStoppedException("other processes write settings of site " + names.site()
                            + " at the same time, again and again: " + e.getMessage(), e);
                }
            } catch (KafkaException e) {
                throw new OperatorStoppedException(
                        "the settings of site " + names.site() + " could not be written: " + e.getMessage(), e);
            }
        }
    }

    private Map<String, Object> producerSettings() {
        Map<String, Object> settings = clients.producer(names.settings() + "-writer");
        settings.put(ProducerConfig.TRANSACTIONAL_ID_CONFIG, names.settings() + "-writer");
        settings.put(ProducerConfig.TRANSACTION_TIMEOUT_CONFIG, Integer.toString(clients.transactionTimeoutMillis()));
        settings.put(ProducerConfig.MAX_BLOCK_MS_CONFIG, "30000");
        return settings;
    }

    /** Read behind the fence: whoever wrote before has been ended, and is seen or was never there. */
    private List<Revision> agree(Revision ours, KafkaProducer<byte[], byte[]> producer) {
        List<Revision> known;
        try (SettingsLog log = new SettingsLog(clients, names.settings())) {
            known = new ArrayList<>(log.news());
        }
        Optional<Revision> latest = known.stream().reduce((a, b) -> b.number() >= a.number() ? b : a);
        latest.ifPresent(this::checkLog);
        if (latest.isPresent() && !isNew(ours, latest.get())) {
            says.accept("settings revision " + ours.number() + " hold already");
            return known;
        }
        latest.ifPresentOrElse(before -> checkFrom(ours), () -> sayFrom(ours));
        write(ours, producer);
        says.accept("settings revision " + ours.number() + " written to " + names.settings() + " and to the log of "
                + (regions.regions().size() == 1 ? "the region" : regions.regions().size() + " regions"));
        known.add(ours);
        return known;
    }

    /** Whether ours has to be written; if not, it is what holds. */
    private static boolean isNew(Revision ours, Revision latest) {
        checkRegions(ours, latest);
        if (ours.number() > latest.number()) {
            return true;
        }
        if (ours.number() < latest.number()) {
            throw new SettingsRefusedException("the site file has revision " + ours.number() + ", and revision "
                    + latest.number() + " holds already: take the newer file, or raise the revision above "
                    + latest.number());
        }
        if (!ours.hasTextOf(latest)) {
            throw new SettingsRefusedException("the site file has revision " + ours.number()
                    + ", and settings with the same revision and other content hold already: raise the revision above "
                    + latest.number());
        }
        return latest.body().getMachineVersion() < RegionMachine.MACHINE_VERSION;
    }

    private static void checkRegions(Revision ours, Revision latest) {
        String difference = RegionDifference.between(latest.site(), ours.site());
        if (!difference.isEmpty()) {
            throw new SettingsRefusedException("the site file has other regions than those that run with revision "
                    + latest.number() + ": " + difference
                    + "; running regions stay as they are, so a site with others needs another name");
        }
    }

    /** Settings go to both in one transaction. */
    private void checkLog(Revision latest) {
        try (LogTail log = new LogTail(clients, names.regionLog())) {
            for (String region : regions.regions()) {
                int partition = regions.partition(region, partitions);
                if (log.isNew(partition)) {
                    throw new OperatorStoppedException("topic " + names.settings() + " holds revision "
                            + latest.number() + ", and partition " + partition + " of " + names.regionLog()
                            + ", the log of region " + region + ", has nothing in it: it has been made anew, without"
                            + " its settings. Delete topic " + names.settings()
                            + " too, and the command topics creates it for a new beginning");
                }
            }
        }
    }

    /** A part is judged when it arrives, by the settings that hold at its time as far as they are known then. */
    private void checkFrom(Revision ours) {
        Long from = ours.entry().getLogTimeMicros();
        if (from == null) {
            return;
        }
        try (LogTail log = new LogTail(clients, names.regionLog())) {
            for (int partition = 0; partition < partitions; partition++) {
                OptionalLong latest = log.latestScanMicros(partition);
                if (latest.isPresent() && latest.getAsLong() >= from) {
                    throw new SettingsRefusedException("the site file's settings hold from " + Times.text(from)
                            + " (from), and the log holds a part of a scan of " + Times.text(latest.getAsLong())
                            + " already: settings must be written ahead of their time; choose a later one, or leave"
                            + " from out, and they hold from where each region meets them");
                }
            }
        }
    }

    private void sayFrom(Revision ours) {
        if (ours.entry().getLogTimeMicros() != null) {
            says.accept("from has no effect on the first settings of a site: they hold from the beginning");
        }
    }

    private void write(Revision ours, KafkaProducer<byte[], byte[]> producer) {
        byte[] value = Wire.encode(ours.entry());
        producer.beginTransaction();
        producer.send(new ProducerRecord<>(names.settings(), 0, ours.key(), value));
        for (String region : regions.regions()) {
            producer.send(new ProducerRecord<>(names.regionLog(), regions.partition(region, partitions),
                    RegionPartitions.key(region), value));
        }
        producer.commitTransaction();
    }
}
