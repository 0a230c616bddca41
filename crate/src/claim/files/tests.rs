use super::*;
use crate::claim::{read, Kind};

fn file<'a>(name: &'a str, text: &'a str) -> OutputFile<'a> {
    OutputFile {
        name,
        bytes: text.as_bytes(),
    }
}

/// The claim of the files, read back: values and columns as doubles.
fn stated(files: &[OutputFile<'_>], order: usize) -> (Vec<f64>, Vec<f64>) {
    let text = claim_of(files, order).expect("a claim");
    let claim = read(&text).unwrap_or_else(|error| panic!("{error}: {text}"));
    let Kind::Output { values, columns } = claim.kind else {
        panic!("no output: {text}");
    };
    let real = |figure: &crate::claim::figure::Figure| figure.re.stated.to_f64().value();
    let columns = columns.map_or(Vec::new(), |table| table.cells.iter().map(real).collect());
    (values.iter().map(real).collect(), columns)
}

#[test]
fn each_form_of_values_and_vectors_is_the_same_claim() {
    let matrix_market_values = "%%MatrixMarket matrix array real general\n2 1\n1\n3\n";
    let matrix_market_vectors =
        "%%MatrixMarket matrix array real general\n2 2\n0.5\n-0.25\n0.75\n1\n";
    let expected = (vec![1.0, 3.0], vec![0.5, 0.75, -0.25, 1.0]);
    for files in [
        vec![file("w.csv", "1,3\n"), file("v.csv", "0.5,0.75\n-0.25,1\n")],
        vec![
            file("v.csv", "0.5,0.75\n-0.25,1\n"),
            file("w.csv", "1\n3\n"),
        ],
        vec![file("all.csv", "1,3\n0.5,0.75\n-0.25,1\n")],
        vec![
            file("w.mtx", matrix_market_values),
            file("v.mtx", matrix_market_vectors),
        ],
        vec![file(
            "r.json",
            r#"{"values":[1,3],"vectors":[[0.5,0.75],[-0.25,1]]}"#,
        )],
        vec![file(
            "own.json",
            r#"{"format":"eigenledger eigenpairs","eigenvalues":[{"approximate":"1"},{"approximate":"3"}],"eigenvectors":[[0.5,-0.25],[0.75,1]]}"#,
        )],
        vec![
            file(
                "values.csv",
                "index,approximate,residual_bound\r\n1,1,2e-16\r\n2,3,2e-16\r\n",
            ),
            file("vectors.csv", "row,v1,v2\r\n1,0.5,0.75\r\n2,-0.25,1\r\n"),
        ],
    ] {
        assert_eq!(
            stated(&files, 2),
            expected,
            "{:?}",
            files.iter().map(|f| f.name).collect::<Vec<_>>()
        );
    }
}

#[test]
fn an_array_file_keeps_its_doubles() {
    let header = "{'descr': '<f8', 'fortran_order': False, 'shape': (2,), }";
    let mut bytes = b"\x93NUMPY\x01\x00".to_vec();
    bytes.extend((header.len() as u16).to_le_bytes());
    bytes.extend(header.as_bytes());
    for value in [0.1f64, 1.0 / 3.0] {
        bytes.extend(value.to_le_bytes());
    }
    let files = [OutputFile {
        name: "w.npy",
        bytes: &bytes,
    }];
    assert_eq!(stated(&files, 2).0, [0.1, 1.0 / 3.0]);
}

#[test]
fn complex_components_are_kept_in_every_form() {
    for file in [
        file(
            "r.json",
            r#"{"w":[1,3],"v":[[[0.5,-0.5],[1,0]],[[0,1],[2,0.25]]]}"#,
        ),
        file("all.csv", "1,3\n0.5-0.5i,1\n1i,2+0.25i\n"),
    ] {
        let text = claim_of(&[file], 2).expect("a claim");
        let Kind::Output {
            columns: Some(columns),
            ..
        } = read(&text).expect("a claim").kind
        else {
            panic!("no vectors: {text}");
        };
        let parts = |at: usize| {
            let cell = &columns.cells[at];
            (
                cell.re.stated.to_f64().value(),
                cell.im.stated.to_f64().value(),
            )
        };
        assert_eq!((parts(0), parts(2)), ((0.5, -0.5), (0.0, 1.0)), "{text}");
        assert_eq!(parts(3), (2.0, 0.25), "{text}");
    }
}

#[test]
fn what_is_no_output_gets_a_sentence() {
    for (files, words) in [
        (vec![file("v.csv", "0.5,0.25\n0.25,1\n")], "no values"),
        (vec![file("w.csv", "1.5,2,3\n")], "the order is 2"),
        (
            vec![file("w.csv", "1,2\n"), file("again.csv", "1,2\n")],
            "already",
        ),
        (vec![file("t.csv", "1,2,3,4\n5,6,7,8\n")], "2 rows of 4"),
        (vec![file("o.json", r#"{"moon":3}"#)], "values or vectors"),
        (vec![file("x.bin", "\u{1}\u{2}")], "text"),
    ] {
        let reason = claim_of(&files, 2).expect_err(words);
        assert!(reason.contains(words) && reason.ends_with('.'), "{reason}");
    }
}

#[test]
fn beyond_the_order_checked_the_values_alone_are_claimed() {
    let order = LARGEST_WITH_VECTORS + 1;
    let row = |first: usize| {
        (0..order)
            .map(|k| (first + k).to_string())
            .collect::<Vec<_>>()
            .join(",")
    };
    let all: Vec<String> = (0..=order).map(row).collect();
    let text = all.join("\n");
    let (values, columns) = stated(&[file("all.csv", &text)], order);
    assert_eq!((values.len(), columns.len()), (order, 0));
}
