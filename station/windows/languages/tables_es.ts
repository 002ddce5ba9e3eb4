<?xml version="1.0" encoding="utf-8"?>
<!DOCTYPE TS>
<TS version="2.1" language="es" sourcelanguage="en">
<context>
    <name>Cautions</name>
    <message>
        <source>A pass is production evidence: this probe met its limit sheet on this station. It does not show the accuracy of
saturation readings in people; that takes controlled desaturation studies, as ISO 80601-2-61 describes.
The radiation of LEDs and electrical safety are for qualified people to judge, under the standards and local
rules in force.
The limits, models and certificates that come with this program are a demonstration. Every one of them must be
replaced by your own before a probe is shipped on its verdict.</source>
        <translation>«Pasa» es una prueba de producción: esta sonda cumplió su hoja de límites en esta estación. No muestra la exactitud de las lecturas de saturación en personas; para eso hacen falta estudios de desaturación controlada, como los que describe ISO 80601-2-61.
La radiación de los LED y la seguridad eléctrica las juzgan personas cualificadas, según las normas y reglas locales en vigor.
Los límites, modelos y certificados que vienen con este programa son una demostración. Cada uno debe sustituirse por el propio antes de que una sonda se entregue con su veredicto.</translation>
    </message>
</context>
<context>
    <name>Check</name>
    <message>
        <source>probe present</source>
        <translation>sonda presente</translation>
    </message>
    <message>
        <source>ID resistance</source>
        <translation>resistencia ID, valor</translation>
    </message>
    <message>
        <source>ID resistor</source>
        <translation>resistencia ID</translation>
    </message>
    <message>
        <source>bin against centroid</source>
        <translation>clase frente a centroide</translation>
    </message>
    <message>
        <source>cable noise</source>
        <translation>ruido del cable</translation>
    </message>
    <message>
        <source>mains pick-up</source>
        <translation>captación de red</translation>
    </message>
    <message>
        <source>red forward voltage</source>
        <translation>tensión directa roja</translation>
    </message>
    <message>
        <source>infrared forward voltage</source>
        <translation>tensión directa infrarroja</translation>
    </message>
    <message>
        <source>red voltage rise</source>
        <translation>aumento de tensión rojo</translation>
    </message>
    <message>
        <source>infrared voltage rise</source>
        <translation>aumento de tensión infrarrojo</translation>
    </message>
    <message>
        <source>red reverse leakage</source>
        <translation>fuga inversa roja</translation>
    </message>
    <message>
        <source>infrared reverse leakage</source>
        <translation>fuga inversa infrarroja</translation>
    </message>
    <message>
        <source>red drive current</source>
        <translation>corriente roja</translation>
    </message>
    <message>
        <source>infrared drive current</source>
        <translation>corriente infrarroja</translation>
    </message>
    <message>
        <source>red warm-up</source>
        <translation>calentamiento rojo</translation>
    </message>
    <message>
        <source>infrared warm-up</source>
        <translation>calentamiento infrarrojo</translation>
    </message>
    <message>
        <source>red peak wavelength</source>
        <translation>longitud de onda de pico roja</translation>
    </message>
    <message>
        <source>infrared peak wavelength</source>
        <translation>longitud de onda de pico infrarroja</translation>
    </message>
    <message>
        <source>red centroid wavelength</source>
        <translation>longitud de onda centroide roja</translation>
    </message>
    <message>
        <source>infrared centroid wavelength</source>
        <translation>longitud de onda centroide infrarroja</translation>
    </message>
    <message>
        <source>red half-power centre</source>
        <translation>centro a media potencia rojo</translation>
    </message>
    <message>
        <source>infrared half-power centre</source>
        <translation>centro a media potencia infrarrojo</translation>
    </message>
    <message>
        <source>red width (FWHM)</source>
        <translation>anchura roja (FWHM)</translation>
    </message>
    <message>
        <source>infrared width (FWHM)</source>
        <translation>anchura infrarroja (FWHM)</translation>
    </message>
    <message>
        <source>secondary emission</source>
        <translation>emisión secundaria</translation>
    </message>
    <message>
        <source>dark current</source>
        <translation>corriente de oscuridad</translation>
    </message>
    <message>
        <source>dark current as found</source>
        <translation>corriente de oscuridad inicial</translation>
    </message>
    <message>
        <source>red transfer</source>
        <translation>transferencia roja</translation>
    </message>
    <message>
        <source>infrared transfer</source>
        <translation>transferencia infrarroja</translation>
    </message>
    <message>
        <source>light around the phantom</source>
        <translation>luz alrededor del fantasma</translation>
    </message>
    <message>
        <source>slot cross-talk</source>
        <translation>diafonía entre ranuras</translation>
    </message>
    <message>
        <source>ambient light taken up</source>
        <translation>luz ambiente captada</translation>
    </message>
    <message>
        <source>red AC/DC against set value</source>
        <translation>AC/DC rojo frente al valor fijado</translation>
    </message>
    <message>
        <source>infrared AC/DC against set value</source>
        <translation>AC/DC infrarrojo frente al valor fijado</translation>
    </message>
    <message>
        <source>ratio at 0.4</source>
        <translation>razón a 0.4</translation>
    </message>
    <message>
        <source>ratio at 1.0</source>
        <translation>razón a 1.0</translation>
    </message>
    <message>
        <source>ratio at 1.6</source>
        <translation>razón a 1.6</translation>
    </message>
    <message>
        <source>slope of the ratio line</source>
        <translation>pendiente de la recta de razones</translation>
    </message>
    <message>
        <source>offset of the ratio line</source>
        <translation>desplazamiento de la recta de razones</translation>
    </message>
    <message>
        <source>non-linearity of the ratio line</source>
        <translation>no linealidad de la recta de razones</translation>
    </message>
    <message>
        <source>modelled saturation error at 100 %</source>
        <translation>error de saturación calculado al 100 %</translation>
    </message>
    <message>
        <source>modelled saturation error at 90 %</source>
        <translation>error de saturación calculado al 90 %</translation>
    </message>
    <message>
        <source>modelled saturation error at 80 %</source>
        <translation>error de saturación calculado al 80 %</translation>
    </message>
    <message>
        <source>modelled saturation error at 70 %</source>
        <translation>error de saturación calculado al 70 %</translation>
    </message>
</context>
<context>
    <name>Problem</name>
    <message>
        <source>there is no such serial port</source>
        <comment>port_missing</comment>
        <translation>ese puerto serie no existe</translation>
    </message>
    <message>
        <source>check the cable and the path in the station file</source>
        <comment>port_missing</comment>
        <translation>compruebe el cable y la ruta en el archivo de la estación</translation>
    </message>
    <message>
        <source>this is no serial port</source>
        <comment>port_not_a_tty</comment>
        <translation>esto no es un puerto serie</translation>
    </message>
    <message>
        <source>check the path in the station file</source>
        <comment>port_not_a_tty</comment>
        <translation>compruebe la ruta en el archivo de la estación</translation>
    </message>
    <message>
        <source>another program holds this serial port</source>
        <comment>port_busy</comment>
        <translation>otro programa ocupa este puerto serie</translation>
    </message>
    <message>
        <source>end the other program; only one station can use a device</source>
        <comment>port_busy</comment>
        <translation>cierre el otro programa; solo una estación puede usar un aparato</translation>
    </message>
    <message>
        <source>this account may not open the serial port</source>
        <comment>port_permission</comment>
        <translation>esta cuenta no puede abrir el puerto serie</translation>
    </message>
    <message>
        <source>add the account to the group dialout and sign in again, or set a udev rule for the device</source>
        <comment>port_permission</comment>
        <translation>añada la cuenta al grupo dialout y vuelva a entrar, o ponga una regla udev para el aparato</translation>
    </message>
    <message>
        <source>the serial port cannot run at {baud} baud</source>
        <comment>port_baud</comment>
        <translation>el puerto serie no puede ir a {baud} baudios</translation>
    </message>
    <message>
        <source>check the baud rate in the station file</source>
        <comment>port_baud</comment>
        <translation>compruebe la velocidad en el archivo de la estación</translation>
    </message>
    <message>
        <source>the serial port failed: {reason}</source>
        <comment>port_failed</comment>
        <translation>el puerto serie ha fallado: {reason}</translation>
    </message>
    <message>
        <source>unplug the device and plug it in again</source>
        <comment>port_failed</comment>
        <translation>desenchufe el aparato y vuelva a enchufarlo</translation>
    </message>
    <message>
        <source>neither a phantom nor an adapter answers here</source>
        <comment>port_unknown_device</comment>
        <translation>aquí no responde ni un fantasma ni un adaptador</translation>
    </message>
    <message>
        <source>check its power and cable; another kind of device can stay where it is</source>
        <comment>port_unknown_device</comment>
        <translation>compruebe su alimentación y su cable; otro tipo de aparato puede quedarse donde está</translation>
    </message>
    <message>
        <source>the device does not answer, tried {tries} times; last: {cause}</source>
        <comment>device_lost</comment>
        <translation>el aparato no responde, {tries} intentos; el último: {cause}</translation>
    </message>
    <message>
        <source>check its cable and power; the station keeps looking for it</source>
        <comment>device_lost</comment>
        <translation>compruebe su cable y su alimentación; la estación lo sigue buscando</translation>
    </message>
    <message>
        <source>the device has started anew and lost its settings</source>
        <comment>device_reset</comment>
        <translation>el aparato ha arrancado de nuevo y ha perdido sus ajustes</translation>
    </message>
    <message>
        <source>check its power supply, then test the probe again</source>
        <comment>device_reset</comment>
        <translation>compruebe su alimentación y vuelva a probar la sonda</translation>
    </message>
    <message>
        <source>the device refuses "{request}": {words}</source>
        <comment>device_refused</comment>
        <translation>el aparato rechaza «{request}»: {words}</translation>
    </message>
    <message>
        <source>check the model's values against what the device can do</source>
        <comment>device_refused</comment>
        <translation>compare los valores del modelo con lo que puede el aparato</translation>
    </message>
    <message>
        <source>the device reports a fault at "{request}": {words}</source>
        <comment>device_fault</comment>
        <translation>el aparato comunica un fallo en «{request}»: {words}</translation>
    </message>
    <message>
        <source>take the device out of use and have it looked at</source>
        <comment>device_fault</comment>
        <translation>retire el aparato y hágalo revisar</translation>
    </message>
    <message>
        <source>its {what} is {found}, expected is {expected}</source>
        <comment>device_stranger</comment>
        <translation>{what} es {found}, se espera {expected}</translation>
    </message>
    <message>
        <source>connect the right device, or correct the station file</source>
        <comment>device_stranger</comment>
        <translation>conecte el aparato correcto o corrija el archivo de la estación</translation>
    </message>
    <message>
        <source>its {what} is {found}, expected is {expected}</source>
        <comment>device_wrong_firmware</comment>
        <translation>{what} es {found}, se espera {expected}</translation>
    </message>
    <message>
        <source>load the firmware that the documents name, or correct them</source>
        <comment>device_wrong_firmware</comment>
        <translation>cargue el firmware que nombran los documentos o corríjalos</translation>
    </message>
    <message>
        <source>its {what} is {found}, the documents say {expected}</source>
        <comment>device_wrong_certificate</comment>
        <translation>{what} es {found}, los documentos dicen {expected}</translation>
    </message>
    <message>
        <source>bring in the certificate that is in force for this device</source>
        <comment>device_wrong_certificate</comment>
        <translation>ponga el certificado que está en vigor para este aparato</translation>
    </message>
    <message>
        <source>a real device is connected where an emulated one is expected</source>
        <comment>device_not_emulated</comment>
        <translation>hay un aparato real donde se espera uno emulado</translation>
    </message>
    <message>
        <source>correct the station file, or connect the emulated bench</source>
        <comment>device_not_emulated</comment>
        <translation>corrija el archivo de la estación o conecte el banco emulado</translation>
    </message>
    <message>
        <source>an emulated device is connected where a real one is expected</source>
        <comment>device_is_emulated</comment>
        <translation>hay un aparato emulado donde se espera uno real</translation>
    </message>
    <message>
        <source>connect the real device, or mark the station as emulated</source>
        <comment>device_is_emulated</comment>
        <translation>conecte el aparato real o marque la estación como emulada</translation>
    </message>
    <message>
        <source>the device runs at speed {found}, the line at {expected}</source>
        <comment>device_speed_mismatch</comment>
        <translation>el aparato va a velocidad {found}, la línea a {expected}</translation>
    </message>
    <message>
        <source>start the bench and the line with the same speed</source>
        <comment>device_speed_mismatch</comment>
        <translation>arranque ambos con la misma velocidad</translation>
    </message>
    <message>
        <source>the LED drive is now {found}, set was {set}</source>
        <comment>drive_lost</comment>
        <translation>la corriente del LED es ahora {found}, debía ser {set}</translation>
    </message>
    <message>
        <source>seat the probe again and repeat; it was pulled out, or the station was silent for too long</source>
        <comment>drive_lost</comment>
        <translation>coloque otra vez la sonda y repita; se sacó, o la estación calló demasiado tiempo</translation>
    </message>
    <message>
        <source>the ledger has no room left: {reason} (SQLite {code})</source>
        <comment>ledger_full</comment>
        <translation>no queda sitio en el registro: {reason} (SQLite {code})</translation>
    </message>
    <message>
        <source>free space on its disk, then start again; what was recorded is kept</source>
        <comment>ledger_full</comment>
        <translation>libere espacio en su disco y arranque de nuevo; lo registrado se conserva</translation>
    </message>
    <message>
        <source>another program holds the ledger: {reason} (SQLite {code})</source>
        <comment>ledger_locked</comment>
        <translation>otro programa ocupa el registro: {reason} (SQLite {code})</translation>
    </message>
    <message>
        <source>end the other program that writes this ledger, then start again</source>
        <comment>ledger_locked</comment>
        <translation>cierre el otro programa que escribe en él y arranque de nuevo</translation>
    </message>
    <message>
        <source>the ledger's file is damaged: {reason} (SQLite {code})</source>
        <comment>ledger_damaged</comment>
        <translation>el archivo del registro está dañado: {reason} (SQLite {code})</translation>
    </message>
    <message>
        <source>keep the file, verify it with 'ledger verify', and restore the newest backup</source>
        <comment>ledger_damaged</comment>
        <translation>guarde el archivo, compruébelo con 'ledger verify' y recupere la copia más reciente</translation>
    </message>
    <message>
        <source>the ledger may not be written: {reason} (SQLite {code})</source>
        <comment>ledger_read_only</comment>
        <translation>no se puede escribir en el registro: {reason} (SQLite {code})</translation>
    </message>
    <message>
        <source>check the permissions of the file and whether its disk is mounted read-only</source>
        <comment>ledger_read_only</comment>
        <translation>compruebe los permisos del archivo y si su disco es de solo lectura</translation>
    </message>
    <message>
        <source>the disk failed under the ledger: {reason} (SQLite {code})</source>
        <comment>ledger_io</comment>
        <translation>ha fallado el disco del registro: {reason} (SQLite {code})</translation>
    </message>
    <message>
        <source>check the disk; start again when it is sound, and verify the ledger</source>
        <comment>ledger_io</comment>
        <translation>compruebe el disco; arranque de nuevo cuando esté bien y verifique el registro</translation>
    </message>
    <message>
        <source>the ledger refused a change: {reason} (SQLite {code})</source>
        <comment>ledger_refused</comment>
        <translation>el registro ha rechazado un cambio: {reason} (SQLite {code})</translation>
    </message>
    <message>
        <source>report this with the words above; nothing of the change was kept</source>
        <comment>ledger_refused</comment>
        <translation>comuníquelo con las palabras de arriba; del cambio no se guardó nada</translation>
    </message>
    <message>
        <source>the ledger had trouble earlier and takes nothing more: {reason}</source>
        <comment>ledger_failed</comment>
        <translation>el registro tuvo antes un fallo y ya no acepta nada: {reason}</translation>
    </message>
    <message>
        <source>mend the cause, then start again</source>
        <comment>ledger_failed</comment>
        <translation>corrija la causa y arranque de nuevo</translation>
    </message>
    <message>
        <source>the ledger's file was moved, taken away or exchanged while it was in use</source>
        <comment>ledger_moved_away</comment>
        <translation>el archivo del registro se movió, se quitó o se cambió mientras se usaba</translation>
    </message>
    <message>
        <source>find out who moved it and put it back; what was recorded by then is in the file that was moved</source>
        <comment>ledger_moved_away</comment>
        <translation>averigüe quién lo movió y devuélvalo; lo registrado hasta entonces está en el archivo movido</translation>
    </message>
    <message>
        <source>the clock stands {seconds} s behind the ledger's last entry</source>
        <comment>ledger_clock_behind</comment>
        <translation>el reloj va {seconds} s por detrás de la última anotación del registro</translation>
    </message>
    <message>
        <source>set the machine's clock right, then start again</source>
        <comment>ledger_clock_behind</comment>
        <translation>ponga en hora el equipo y arranque de nuevo</translation>
    </message>
    <message>
        <source>this volume of the ledger is closed and takes nothing more</source>
        <comment>ledger_volume_closed</comment>
        <translation>este tomo del registro está cerrado y ya no acepta nada</translation>
    </message>
    <message>
        <source>finish with 'ledger close-volume', which begins the next volume</source>
        <comment>ledger_volume_closed</comment>
        <translation>termine con 'ledger close-volume', que empieza el tomo siguiente</translation>
    </message>
    <message>
        <source>the ledger was begun on {ledger}; it takes no production run that is {run}</source>
        <comment>run_refused_emulated</comment>
        <translation>el registro se empezó con {ledger}; no acepta una pasada de producción que es {run}</translation>
    </message>
    <message>
        <source>use the ledger of the other bench, or another purpose</source>
        <comment>run_refused_emulated</comment>
        <translation>use el registro del otro banco u otro propósito</translation>
    </message>
    <message>
        <source>the machine's clock is not synchronised</source>
        <comment>clock_unsynchronised</comment>
        <translation>el reloj del equipo no está sincronizado</translation>
    </message>
    <message>
        <source>switch on time synchronisation (NTP)</source>
        <comment>clock_unsynchronised</comment>
        <translation>active la sincronización horaria (NTP)</translation>
    </message>
    <message>
        <source>only {room} GB are left for the ledger</source>
        <comment>disk_nearly_full</comment>
        <translation>solo quedan {room} GB para el registro</translation>
    </message>
    <message>
        <source>make room, or move the ledger to a larger disk</source>
        <comment>disk_nearly_full</comment>
        <translation>haga sitio o pase el registro a un disco mayor</translation>
    </message>
    <message>
        <source>not ready: {reason}</source>
        <comment>nest_not_ready</comment>
        <translation>no está listo: {reason}</translation>
    </message>
    <message>
        <source>mend what is named, or run 'probewright checkup'</source>
        <comment>nest_not_ready</comment>
        <translation>corrija lo que se nombra o ejecute 'probewright checkup'</translation>
    </message>
    <message>
        <source>this lot card cannot be read: {why}</source>
        <comment>lot_card_malformed</comment>
        <translation>no se puede leer esta tarjeta de lote: {why}</translation>
    </message>
    <message>
        <source>a lot card says LOT/lot/model/quantity/first serial</source>
        <comment>lot_card_malformed</comment>
        <translation>una tarjeta de lote dice LOT/lote/modelo/cantidad/primer número de serie</translation>
    </message>
    <message>
        <source>the lot card names the model {model}, which this station does not have</source>
        <comment>lot_card_model</comment>
        <translation>la tarjeta nombra el modelo {model}, que esta estación no tiene</translation>
    </message>
    <message>
        <source>bring the lot to a station that tests it, or add the model's documents</source>
        <comment>lot_card_model</comment>
        <translation>lleve el lote a una estación que lo pruebe o añada los documentos del modelo</translation>
    </message>
    <message>
        <source>{serial} is no serial of the model {model}</source>
        <comment>lot_card_serial</comment>
        <translation>{serial} no es un número de serie del modelo {model}</translation>
    </message>
    <message>
        <source>have the lot card printed anew</source>
        <comment>lot_card_serial</comment>
        <translation>pida que se imprima otra vez la tarjeta</translation>
    </message>
    <message>
        <source>nothing was scanned</source>
        <comment>scan_empty</comment>
        <translation>no se ha leído nada</translation>
    </message>
    <message>
        <source>scan a badge, a lot card or a probe</source>
        <comment>scan_empty</comment>
        <translation>lea una tarjeta personal, una tarjeta de lote o una sonda</translation>
    </message>
    <message>
        <source>the text is longer than {bound} characters</source>
        <comment>scan_too_long</comment>
        <translation>el texto pasa de {bound} caracteres</translation>
    </message>
    <message>
        <source>scan one code at a time: a badge, a lot card or a probe</source>
        <comment>scan_too_long</comment>
        <translation>lea un código cada vez: tarjeta personal, tarjeta de lote o sonda</translation>
    </message>
    <message>
        <source>the text holds characters that no code here has</source>
        <comment>scan_control</comment>
        <translation>el texto tiene caracteres que aquí no tiene ningún código</translation>
    </message>
    <message>
        <source>scan again; check the scanner's keyboard setting</source>
        <comment>scan_control</comment>
        <translation>léalo otra vez; compruebe el ajuste de teclado del lector</translation>
    </message>
    <message>
        <source>this is no badge, no lot card and no serial of a model of this station</source>
        <comment>scan_unknown</comment>
        <translation>esto no es una tarjeta personal, ni de lote, ni un número de serie de esta estación</translation>
    </message>
    <message>
        <source>scan the probe's own label, your badge, or the lot card</source>
        <comment>scan_unknown</comment>
        <translation>lea la etiqueta de la sonda, su tarjeta o la tarjeta de lote</translation>
    </message>
    <message>
        <source>nobody is signed in</source>
        <comment>nobody_signed_in</comment>
        <translation>no ha entrado nadie</translation>
    </message>
    <message>
        <source>scan your badge</source>
        <comment>nobody_signed_in</comment>
        <translation>lea su tarjeta personal</translation>
    </message>
    <message>
        <source>{person} ({role}) may not run probes</source>
        <comment>person_may_not</comment>
        <translation>{person} ({role}) no puede probar sondas</translation>
    </message>
    <message>
        <source>let an operator or engineer sign in</source>
        <comment>person_may_not</comment>
        <translation>que entre un operario o un técnico</translation>
    </message>
    <message>
        <source>runs of {person} go on</source>
        <comment>sign_in_while_testing</comment>
        <translation>hay pasadas de {person} en marcha</translation>
    </message>
    <message>
        <source>wait for their end, or let {person} sign out</source>
        <comment>sign_in_while_testing</comment>
        <translation>espere a que acaben, o que {person} salga</translation>
    </message>
    <message>
        <source>no lot is open</source>
        <comment>no_lot_open</comment>
        <translation>no hay ningún lote abierto</translation>
    </message>
    <message>
        <source>scan the lot card</source>
        <comment>no_lot_open</comment>
        <translation>lea la tarjeta de lote</translation>
    </message>
    <message>
        <source>lot {lot} is open</source>
        <comment>lot_is_open</comment>
        <translation>el lote {lot} está abierto</translation>
    </message>
    <message>
        <source>close it before another one is opened</source>
        <comment>lot_is_open</comment>
        <translation>ciérrelo antes de abrir otro</translation>
    </message>
    <message>
        <source>lot {lot} was closed</source>
        <comment>lot_was_closed</comment>
        <translation>el lote {lot} se cerró</translation>
    </message>
    <message>
        <source>ask an engineer; a closed lot is not opened again</source>
        <comment>lot_was_closed</comment>
        <translation>pregunte a un técnico; un lote cerrado no se vuelve a abrir</translation>
    </message>
    <message>
        <source>lot {lot} was opened before with another card</source>
        <comment>lot_card_differs</comment>
        <translation>el lote {lot} se abrió antes con otra tarjeta</translation>
    </message>
    <message>
        <source>find the card with the same model, quantity and serials</source>
        <comment>lot_card_differs</comment>
        <translation>busque la tarjeta con el mismo modelo, cantidad y números de serie</translation>
    </message>
    <message>
        <source>{serial} does not belong to lot {lot} ({first} to {last})</source>
        <comment>serial_of_other_lot</comment>
        <translation>{serial} no pertenece al lote {lot} ({first} a {last})</translation>
    </message>
    <message>
        <source>put it back to its own lot</source>
        <comment>serial_of_other_lot</comment>
        <translation>devuélvala a su lote</translation>
    </message>
    <message>
        <source>{serial} has passed already, in run {run}</source>
        <comment>serial_passed</comment>
        <translation>{serial} ya ha pasado, en la pasada {run}</translation>
    </message>
    <message>
        <source>put it on the tray for passed probes</source>
        <comment>serial_passed</comment>
        <translation>póngala en la bandeja de las que han pasado</translation>
    </message>
    <message>
        <source>{serial} is in test already</source>
        <comment>serial_in_nest</comment>
        <translation>{serial} ya está en prueba</translation>
    </message>
    <message>
        <source>scan the probe that you hold</source>
        <comment>serial_in_nest</comment>
        <translation>lea la sonda que tiene en la mano</translation>
    </message>
    <message>
        <source>{serial} has had all its {tries} tries</source>
        <comment>serial_tries_used</comment>
        <translation>{serial} ya ha tenido sus {tries} intentos</translation>
    </message>
    <message>
        <source>put it on the tray for failed probes</source>
        <comment>serial_tries_used</comment>
        <translation>póngala en la bandeja de las que fallan</translation>
    </message>
    <message>
        <source>{serial} must rest for another {seconds} s</source>
        <comment>serial_rests</comment>
        <translation>{serial} debe reposar otros {seconds} s</translation>
    </message>
    <message>
        <source>set it aside and take the next one</source>
        <comment>serial_rests</comment>
        <translation>déjela aparte y tome la siguiente</translation>
    </message>
    <message>
        <source>{serial} was tested twice without a verdict</source>
        <comment>serial_voided_twice</comment>
        <translation>{serial} se probó dos veces sin veredicto</translation>
    </message>
    <message>
        <source>set it aside and call an engineer</source>
        <comment>serial_voided_twice</comment>
        <translation>déjela aparte y llame a un técnico</translation>
    </message>
    <message>
        <source>{serial} is awaited here</source>
        <comment>other_probe_awaited</comment>
        <translation>aquí se espera {serial}</translation>
    </message>
    <message>
        <source>put it in first, or wait until it is called off</source>
        <comment>other_probe_awaited</comment>
        <translation>póngala primero, o espere a que se anule</translation>
    </message>
    <message>
        <source>no nest is empty</source>
        <comment>no_nest_empty</comment>
        <translation>no hay ningún nido vacío</translation>
    </message>
    <message>
        <source>take a tested probe out first</source>
        <comment>no_nest_empty</comment>
        <translation>saque primero una sonda ya probada</translation>
    </message>
    <message>
        <source>no nest is free</source>
        <comment>no_nest_free</comment>
        <translation>no hay ningún nido libre</translation>
    </message>
    <message>
        <source>wait for a verdict</source>
        <comment>no_nest_free</comment>
        <translation>espere un veredicto</translation>
    </message>
    <message>
        <source>a probe was put into nest {other}, but {serial} was scanned for this nest</source>
        <comment>probe_in_other_nest</comment>
        <translation>se puso una sonda en el nido {other}, pero {serial} se leyó para este nido</translation>
    </message>
    <message>
        <source>take it out there and scan it again</source>
        <comment>probe_in_other_nest</comment>
        <translation>sáquela de allí y léala otra vez</translation>
    </message>
    <message>
        <source>the devices are being looked for</source>
        <comment>nest_connecting</comment>
        <translation>se están buscando los aparatos</translation>
    </message>
    <message>
        <source>wait, or check their cables and power</source>
        <comment>nest_connecting</comment>
        <translation>espere, o compruebe sus cables y su alimentación</translation>
    </message>
    <message>
        <source>the station has no nest {nest}</source>
        <comment>nest_not_there</comment>
        <translation>la estación no tiene nido {nest}</translation>
    </message>
    <message>
        <source>use one of the nests that its file names</source>
        <comment>nest_not_there</comment>
        <translation>use uno de los nidos que nombra su archivo</translation>
    </message>
    <message>
        <source>nothing is armed or running here</source>
        <comment>nest_idle</comment>
        <translation>aquí no hay nada esperado ni en marcha</translation>
    </message>
    <message>
        <source>there is nothing to stop</source>
        <comment>nest_idle</comment>
        <translation>no hay nada que detener</translation>
    </message>
    <message>
        <source>probe {serial} is being tested</source>
        <comment>nest_busy</comment>
        <translation>se está probando la sonda {serial}</translation>
    </message>
    <message>
        <source>wait for its verdict, or stop it</source>
        <comment>nest_busy</comment>
        <translation>espere su veredicto o deténgala</translation>
    </message>
    <message>
        <source>a probe was in the nest before {serial} was scanned</source>
        <comment>nest_occupied</comment>
        <translation>había una sonda en el nido antes de leer {serial}</translation>
    </message>
    <message>
        <source>take the probe out, scan it again, then put it in</source>
        <comment>nest_occupied</comment>
        <translation>saque la sonda, léala otra vez y póngala</translation>
    </message>
    <message>
        <source>'{serial}' is no serial number of one of this station's models</source>
        <comment>serial_unknown</comment>
        <translation>«{serial}» no es un número de serie de un modelo de esta estación</translation>
    </message>
    <message>
        <source>scan the probe's own label; check the model's serial pattern</source>
        <comment>serial_unknown</comment>
        <translation>lea la etiqueta de la sonda; compruebe el patrón de números del modelo</translation>
    </message>
    <message>
        <source>a production run needs an open lot, an opening check and signed documents, which this command does not have</source>
        <comment>purpose_not_possible</comment>
        <translation>una pasada de producción necesita un lote abierto, una comprobación de apertura y documentos firmados, que aquí no hay</translation>
    </message>
    <message>
        <source>use purpose engineering or training</source>
        <comment>purpose_not_possible</comment>
        <translation>use el propósito técnica o formación</translation>
    </message>
    <message>
        <source>probe {serial} was not put in within 20 s</source>
        <comment>arming_ended</comment>
        <translation>la sonda {serial} no se puso en 20 s</translation>
    </message>
    <message>
        <source>scan it again, then put it in</source>
        <comment>arming_ended</comment>
        <translation>léala otra vez y póngala</translation>
    </message>
    <message>
        <source>the scan of {serial} was taken back by {who}</source>
        <comment>arming_taken_back</comment>
        <translation>{who} ha anulado la lectura de {serial}</translation>
    </message>
    <message>
        <source>scan the probe that is to be tested</source>
        <comment>arming_taken_back</comment>
        <translation>lea la sonda que se va a probar</translation>
    </message>
    <message>
        <source>the certificate {number} held up to {due}</source>
        <comment>certificate_ended</comment>
        <translation>el certificado {number} valía hasta {due}</translation>
    </message>
    <message>
        <source>have the device calibrated and put its new certificate into the configuration</source>
        <comment>certificate_ended</comment>
        <translation>haga calibrar el aparato y ponga el certificado nuevo en la configuración</translation>
    </message>
    <message>
        <source>the certificate {number} holds up to {due} only</source>
        <comment>certificate_ends_soon</comment>
        <translation>el certificado {number} solo vale hasta {due}</translation>
    </message>
    <message>
        <source>plan the device's calibration</source>
        <comment>certificate_ends_soon</comment>
        <translation>planifique la calibración del aparato</translation>
    </message>
    <message>
        <source>the lid was opened during the run</source>
        <comment>lid_opened</comment>
        <translation>se abrió la tapa durante la pasada</translation>
    </message>
    <message>
        <source>scan the probe again and leave the lid closed</source>
        <comment>lid_opened</comment>
        <translation>lea otra vez la sonda y deje la tapa cerrada</translation>
    </message>
    <message>
        <source>the probe was taken out during the run</source>
        <comment>probe_unplugged</comment>
        <translation>se sacó la sonda durante la pasada</translation>
    </message>
    <message>
        <source>scan the probe again and leave it in until the verdict</source>
        <comment>probe_unplugged</comment>
        <translation>lea otra vez la sonda y déjela hasta el veredicto</translation>
    </message>
    <message>
        <source>the probe was taken out and put in again during the run</source>
        <comment>probe_exchanged</comment>
        <translation>se sacó la sonda durante la pasada y se volvió a poner</translation>
    </message>
    <message>
        <source>scan the probe that is in the nest again and leave it in until the verdict</source>
        <comment>probe_exchanged</comment>
        <translation>lea otra vez la sonda del nido y déjela hasta el veredicto</translation>
    </message>
    <message>
        <source>the phantom stores no set point with the ratio {ratio}</source>
        <comment>set_point_not_stored</comment>
        <translation>el fantasma no guarda ningún punto con la razón {ratio}</translation>
    </message>
    <message>
        <source>check the phantom against its certificate and the model's set points</source>
        <comment>set_point_not_stored</comment>
        <translation>compare el fantasma con su certificado y los puntos del modelo</translation>
    </message>
    <message>
        <source>the run took longer than any run can</source>
        <comment>run_too_long</comment>
        <translation>la pasada ha durado más de lo posible</translation>
    </message>
    <message>
        <source>check the devices' cables, then scan the probe again</source>
        <comment>run_too_long</comment>
        <translation>compruebe los cables de los aparatos y lea otra vez la sonda</translation>
    </message>
    <message>
        <source>a part of this run did not go into the ledger</source>
        <comment>run_stage_lost</comment>
        <translation>una parte de esta pasada no llegó al registro</translation>
    </message>
    <message>
        <source>start the program again</source>
        <comment>run_stage_lost</comment>
        <translation>arranque de nuevo el programa</translation>
    </message>
    <message>
        <source>an earlier start left a run of {serial} open; it was closed as {verdict}</source>
        <comment>run_closed_late</comment>
        <translation>un arranque anterior dejó abierta una pasada de {serial}; se cerró como {verdict}</translation>
    </message>
    <message>
        <source>nothing is to be done; 'probewright trace {serial}' shows it</source>
        <comment>run_closed_late</comment>
        <translation>no hay que hacer nada; 'probewright trace {serial}' la muestra</translation>
    </message>
    <message>
        <source>the program made a mistake: {what}</source>
        <comment>our_bug</comment>
        <translation>el programa ha cometido un error: {what}</translation>
    </message>
    <message>
        <source>report it with the ledger and the record of the bytes</source>
        <comment>our_bug</comment>
        <translation>comuníquelo con el registro y la grabación de los bytes</translation>
    </message>
    <message>
        <source>nest {nest} has {phantoms} phantoms and {adapters} adapters</source>
        <comment>setup_nest_incomplete</comment>
        <translation>el nido {nest} tiene {phantoms} fantasmas y {adapters} adaptadores</translation>
    </message>
    <message>
        <source>give each nest one of both</source>
        <comment>setup_nest_incomplete</comment>
        <translation>dé a cada nido uno de cada</translation>
    </message>
    <message>
        <source>no device was found</source>
        <comment>setup_no_device</comment>
        <translation>no se ha encontrado ningún aparato</translation>
    </message>
    <message>
        <source>plug in the devices of the nests and switch them on, or open the emulated bench</source>
        <comment>setup_no_device</comment>
        <translation>enchufe y encienda los aparatos de los nidos, o abra el banco emulado</translation>
    </message>
</context>
</TS>
