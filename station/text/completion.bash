# Completion of probewright for bash: source this file, or put it into /usr/share/bash-completion/completions/probewright.

_probewright() {
  local word=${COMP_WORDS[COMP_CWORD]} before=${COMP_WORDS[COMP_CWORD-1]} command= second= i
  local common="--config --station --help"
  COMPREPLY=()
  for ((i = 1; i < COMP_CWORD; i++)); do
    case ${COMP_WORDS[i]} in
      demo | line | bench | test | replay | recording | checkup | trace | rederive | impact | report | label | ledger | limits | simulate | measure) command=${COMP_WORDS[i]} second=${COMP_WORDS[i+1]} && break ;;
    esac
  done
  case $before in
    --config | --ports | --attach | --control | --truth | --scenario | --record | --ledger | --model | --out | --key | --certificate | --sheet) mapfile -t COMPREPLY < <(compgen -f -- "$word"); return ;;
    --purpose) mapfile -t COMPREPLY < <(compgen -W "production engineering reference challenge gauge echo training return" -- "$word"); return ;;
    --band) mapfile -t COMPREPLY < <(compgen -W "red infrared" -- "$word"); return ;;
    --as) mapfile -t COMPREPLY < <(compgen -W "runs readings json bundle" -- "$word"); return ;;
    --off) mapfile -t COMPREPLY < <(compgen -W "wavelength temperature slit ratio modulation drive photocurrent voltage resistance" -- "$word"); return ;;
    --kind) mapfile -t COMPREPLY < <(compgen -W "pass fail" -- "$word"); return ;;
    --frequency) mapfile -t COMPREPLY < <(compgen -W "known free" -- "$word"); return ;;
  esac
  local words=
  case $command in
    "") words="demo line bench test replay recording checkup trace rederive impact report label ledger limits simulate measure --version $common" ;;
    demo) words="--headless --probes --nests --speed --seed --mistakes --out --json $common" ;;
    line) words="--text --ledger --ports --speed --hands --control $common" ;;
    bench) words="--nests --speed --seed --perfect --ambient-C --mains-Hz --ports --attach --control --scenario --truth --seat $common" ;;
    test) words="--nest --purpose --operator --ledger --ports --speed --hands --no-hands --control --record --json $common" ;;
    replay) words="--json $common" ;;
    recording)
      words="show cut $common"
      [ "$second" = show ] && words="--device --from --to $common"
      [ "$second" = cut ] && words="--from --to $common"
      ;;
    checkup) words="--ledger --ports --speed --json $common" ;;
    trace) words="--lot --person --entry --day --ledger --json $common" ;;
    label) words="--out --kind --reason --operator --width-mm --height-mm --dpi --ledger --json $common" ;;
    report)
      words="run serial shift $common"
      [ "$second" = run ] && words="--out --ledger --json $common"
      [ "$second" = serial ] && words="--out --ledger --json $common"
      [ "$second" = shift ] && words="--from --to --day --lot --out --ledger --json $common"
      ;;
    rederive) words="--lot --run --all --ledger --threads --json $common" ;;
    impact) words="--since --until --off --by --both-ways --certificate --ledger --threads --hold --who --reason --json $common" ;;
    ledger)
      words="verify seal backup restore close-volume prune export $common"
      [ "$second" = backup ] && words="--ledger --who --json $common"
      [ "$second" = restore ] && words="--drill --ledger --seal --entry --who --reason --json $common"
      [ "$second" = close-volume ] && words="--ledger --who --reason --json $common"
      [ "$second" = prune ] && words="--ledger --record-days --keep-one-in --take-away --who --reason --json $common"
      [ "$second" = export ] && words="--as --serial --lot --key --with-captures --ledger --who --json $common"
      [ "$second" = verify ] && words="--seal --entry --from --json $common"
      [ "$second" = seal ] && words="--json $common"
      ;;
    simulate) words="--probes --stations --seed --sheet --model --retest --faults --threads --json $common" ;;
    limits)
      words="check diff $common"
      [ "$second" = check ] && words="--model --json $common"
      [ "$second" = diff ] && words="--json $common"
      ;;
    measure)
      words="spectrum pulses $common"
      [ "$second" = spectrum ] && words="--band --threshold --temperature-C --slit-nm --json $common"
      [ "$second" = pulses ] && words="--rate-Hz --cycle-s --frequency --json $common"
      ;;
  esac
  mapfile -t COMPREPLY < <(compgen -W "$words" -- "$word")
  [[ $word == -* || -z $command ]] || mapfile -t -O "${#COMPREPLY[@]}" COMPREPLY < <(compgen -f -- "$word")
}
complete -F _probewright probewright
